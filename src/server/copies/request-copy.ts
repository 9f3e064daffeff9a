import { sequelize } from '#db/client.ts';
import { Copy, Licence, Plan, Revision, SavedFit } from '#db/models/index.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import type { Actor } from '../accounts/actor.ts';
import { requireMay } from '../accounts/may.ts';
import { refuse } from '../errors.ts';
import { enqueue } from '../jobs/enqueue.ts';
import { requireFit } from '../licences/require-fit.ts';
import { getCompiledPlan } from '../publishing/get-compiled-plan.ts';
import { contentKeyOf } from './content-key.ts';
import { viewCopy, type CopyView } from './view-copy.ts';

export interface CopyRequest {
  actor: Actor;
  licenceId: string;
  /** The saved fit that it is made of, to be named in the drawer. */
  fitId?: string | undefined;
  fit: unknown;
  paper: 'a4' | 'letter';
}

/**
 * Orders a copy at a fit; a job makes it. The same sizes, units, paper and revision give the copy that exists already.
 * @throws NOT_FOUND for another's licence, LICENCE_ENDED, BAD_INPUT for sizes at which the piece cannot be built
 */
export async function requestCopy({
  actor,
  licenceId,
  fitId,
  fit: input,
  paper,
}: CopyRequest): Promise<CopyView> {
  const licence = await Licence.findByPk(licenceId, { include: [{ model: Plan, as: 'plan' }] });
  if (!licence) return refuse('NOT_FOUND');
  requireMay(actor, 'licence:use', licence);
  const revisionId = licence.plan?.currentRevisionId;
  if (!revisionId) return refuse('NOT_FOUND');
  const fit = await requireFit(revisionId, input);
  requireBuildable(resolvePlan(await getCompiledPlan(revisionId), fit));
  const ownFit =
    fitId && actor.kind === 'user'
      ? await SavedFit.findOne({ where: { id: fitId, userId: actor.id }, attributes: ['id'] })
      : null;
  const contentKey = contentKeyOf({ revisionId, fit, paper });

  return sequelize.transaction(async (transaction) => {
    const [copy] = await Copy.findOrCreate({
      where: { licenceId: licence.id, contentKey },
      defaults: {
        licenceId: licence.id,
        revisionId,
        fitId: ownFit?.id ?? null,
        fit,
        units: fit.units,
        paper,
        contentKey,
      },
      transaction,
    });
    if (copy.state === 'failed')
      await copy.update({ state: 'queued', progress: 0, stage: 'waiting', failure: null }, { transaction });
    if (copy.state === 'queued')
      await enqueue('make-copy', { copyId: copy.id }, { key: `copy:${copy.id}`, transaction });
    const revision = await Revision.findByPk(revisionId, {
      attributes: ['letter', 'publishedAt'],
      transaction,
    });
    return { ...viewCopy(await copy.reload({ transaction })), revisionLetter: revision?.letter ?? '' };
  });
}

function requireBuildable(resolved: ReturnType<typeof resolvePlan>): void {
  const broken = resolved.requirements
    .filter((requirement) => !requirement.holds)
    .map((requirement) => requirement.message);
  const impossible = resolved.problems
    .filter((problem) => problem.severity === 'error')
    .map((problem) => problem.message);
  const reasons = [...broken, ...impossible];
  if (reasons.length > 0)
    refuse('BAD_INPUT', { detail: `The piece cannot be built at these sizes. ${reasons.join(' ')}` });
}
