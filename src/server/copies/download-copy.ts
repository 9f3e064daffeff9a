import { Copy, Licence, Plan, Revision } from '#db/models/index.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay } from '../accounts/may.ts';
import { refuse } from '../errors.ts';
import { presignDownload } from '../storage/object-store.ts';
import { viewCopy, type CopyView } from './view-copy.ts';

async function findOwn(copyId: string): Promise<Copy | null> {
  return Copy.findByPk(copyId, {
    include: [
      {
        model: Licence,
        as: 'licence',
        include: [{ model: Plan, as: 'plan', attributes: ['slug', 'title'] }],
      },
      { model: Revision, as: 'revision', attributes: ['letter', 'publishedAt'] },
    ],
  });
}

/** How far a copy is. @throws NOT_FOUND for another's copy */
export async function readCopy(actor: Actor, copyId: string): Promise<CopyView> {
  const copy = await findOwn(copyId);
  if (!copy?.licence) return refuse('NOT_FOUND');
  requireMay(actor, 'licence:read', copy.licence);
  return viewCopy(copy);
}

/**
 * A link that fetches a copy for five minutes. The licence is checked each time, so a refund stops the next click.
 * @throws NOT_FOUND for another's copy, LICENCE_ENDED, COPY_NOT_READY
 */
export async function downloadCopy(actor: Actor, copyId: string): Promise<string> {
  const copy = await findOwn(copyId);
  if (!copy?.licence) return refuse('NOT_FOUND');
  requireMay(actor, 'copy:download', { licence: copy.licence });
  if (copy.state !== 'ready' || !copy.objectKey) return refuse('COPY_NOT_READY');
  const name = `${copy.licence.plan?.slug ?? 'plan'}-${copy.revision?.letter ?? ''}-copy-${copy.number}.pdf`;
  return presignDownload(copy.objectKey, name, 'application/pdf');
}
