import { useQueries } from '@tanstack/react-query';
import { ProgressBar } from '#components/ui/ProgressBar.tsx';
import { paths } from '#lib/paths.ts';
import type { CopyView } from '#server/copies/view-copy.ts';

interface CopyListProps {
  copies: readonly CopyView[];
  /** False when the licence has ended: copies are listed but can no longer be fetched. */
  isUsable: boolean;
}

const POLL_MS = 700;
const isUnderWay = (copy: CopyView) => copy.state === 'queued' || copy.state === 'making';

async function fetchCopy(copyId: string): Promise<CopyView> {
  const response = await fetch(paths.copyState(copyId));
  if (!response.ok) throw new Error(`the server answered ${String(response.status)}`);
  return (await response.json()) as CopyView;
}

function formatBytes(bytes: number): string {
  return bytes >= 1_000_000
    ? `${(bytes / 1_000_000).toFixed(1)} MB`
    : `${Math.max(1, Math.round(bytes / 1000))} kB`;
}

/** The copies of a licence. One that is being made shows how far it is; the page may be left and come back to. */
export function CopyList({ copies, isUsable }: CopyListProps) {
  const live = useQueries({
    queries: copies.map((copy) => ({
      queryKey: ['copy', copy.id],
      queryFn: () => fetchCopy(copy.id),
      initialData: copy,
      enabled: isUnderWay(copy),
      refetchInterval: (query: { state: { data?: CopyView | undefined } }) =>
        query.state.data && isUnderWay(query.state.data) ? POLL_MS : false,
    })),
  });
  if (copies.length === 0) return <p className="secondary">No copies yet. Set the sizes and make one.</p>;
  return (
    <ul className="copies">
      {live.map(({ data: copy }) => (
        <li key={copy.id} className="copies__copy">
          <p>
            <strong>Copy {copy.number}</strong>, revision {copy.revisionLetter},{' '}
            {copy.units === 'in' ? 'inches' : 'millimetres'}, {copy.paper === 'a4' ? 'A4' : 'Letter'}{' '}
            <span className="small secondary">{copy.createdAt.slice(0, 10)}</span>
          </p>
          {isUnderWay(copy) ? <ProgressBar label={copy.stage} done={copy.progress / 100} /> : null}
          {copy.state === 'failed' ? <p className="field__error">{copy.failure}</p> : null}
          {copy.state === 'ready' && isUsable ? (
            <p>
              <a className="button" href={paths.copyDownload(copy.id)} download>
                Download copy {copy.number}
              </a>{' '}
              <span className="small secondary">
                {copy.pages} pages{copy.bytes ? `, ${formatBytes(copy.bytes)}` : ''}
              </span>
            </p>
          ) : null}
        </li>
      ))}
    </ul>
  );
}
