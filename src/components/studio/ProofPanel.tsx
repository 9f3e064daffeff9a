import { useEffect, useState } from 'react';
import { Notice } from '#components/ui/Notice.tsx';
import { ProgressBar } from '#components/ui/ProgressBar.tsx';
import type { ProofRecord } from '#lib/plan/proof-record.ts';
import { paths } from '#lib/paths.ts';

interface ProofPanelProps {
  planId: string;
  initial: ProofRecord | null;
}

const isUnderWay = (proof: ProofRecord | null) => proof?.state === 'waiting' || proof?.state === 'running';

async function ask(planId: string, method: 'GET' | 'POST'): Promise<ProofRecord | null> {
  const response = await fetch(paths.proof(planId), {
    method,
    ...(method === 'POST' ? { headers: { 'content-type': 'application/json' }, body: '{}' } : {}),
  });
  if (!response.ok) throw new Error('The server did not answer. Try again.');
  return ((await response.json()) as { proof: ProofRecord | null }).proof;
}

/** The range proof of the saved draft: asked for here, run by a job, shown as it goes. The page may be left meanwhile. */
export function ProofPanel({ planId, initial }: ProofPanelProps) {
  const [proof, setProof] = useState(initial);
  const [failure, setFailure] = useState<string | null>(null);
  useEffect(() => {
    if (!isUnderWay(proof)) return undefined;
    const timer = setTimeout(() => {
      ask(planId, 'GET').then(setProof, (error: unknown) => {
        setFailure(error instanceof Error ? error.message : 'The server did not answer.');
      });
    }, 600);
    return () => {
      clearTimeout(timer);
    };
  }, [planId, proof]);

  return (
    <div className="proof" role="status">
      <p>
        The proof tries the saved draft at everything that it allows: all choices, the corners of every size,
        the edges of every requirement, and sizes in between.
      </p>
      <div className="actions">
        <button
          type="button"
          className="button"
          disabled={isUnderWay(proof)}
          onClick={() => {
            setFailure(null);
            ask(planId, 'POST').then(setProof, (error: unknown) => {
              setFailure(error instanceof Error ? error.message : 'The server did not answer.');
            });
          }}
        >
          Prove the draft
        </button>
      </div>
      {failure ? (
        <Notice kind="error" title="Not proved">
          <p>{failure}</p>
        </Notice>
      ) : null}
      {isUnderWay(proof) ? (
        <ProgressBar
          label={proof?.state === 'waiting' ? 'waiting for its turn' : 'trying sizes'}
          done={(proof?.progress ?? 0) / 100}
        />
      ) : null}
      {proof?.state === 'holds' ? (
        <Notice kind="holds" title="The plan holds">
          <Sentences proof={proof} />
        </Notice>
      ) : null}
      {proof?.state === 'fails' ? (
        <Notice kind="error" title="The plan fails">
          <ul>
            {proof.failures.map((sentence) => (
              <li key={sentence}>{sentence}</li>
            ))}
          </ul>
          <Sentences proof={proof} />
        </Notice>
      ) : null}
    </div>
  );
}

function Sentences({ proof }: { proof: ProofRecord }) {
  return (
    <>
      {proof.proved.length > 0 ? <p>Proved for all sizes: {proof.proved.join(' ')}</p> : null}
      {proof.tried.length > 0 ? <p>Tried: {proof.tried.join(' ')}</p> : null}
      <p className="small secondary">Run on {proof.ranAt.slice(0, 16).replace('T', ' ')} UTC.</p>
    </>
  );
}
