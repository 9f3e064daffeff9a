import { Revision } from '#db/models/index.ts';
import { compilePlan } from '#lib/plan/compile.ts';
import { PLAN_FORMAT } from '#lib/plan/format.ts';
import type { CompiledPlan } from '#lib/plan/types.ts';
import { refuse } from '../errors.ts';

/** Published revisions never change, so their compiled form may be kept; oldest go first. */
const MAX_KEPT = 200;
const kept = new Map<string, CompiledPlan>();

/**
 * The compiled plan of a published revision, ready to resolve. One that was stored in an older form is compiled again from its text.
 * @throws NOT_FOUND for a revision that is not published or no longer compiles
 */
export async function getCompiledPlan(revisionId: string): Promise<CompiledPlan> {
  const known = kept.get(revisionId);
  if (known) return known;
  const revision = await Revision.findByPk(revisionId, { attributes: ['id', 'state', 'source', 'compiled'] });
  if (!revision || revision.state === 'draft') return refuse('NOT_FOUND');
  const stored = revision.compiled;
  const plan = stored?.format === PLAN_FORMAT ? stored : compilePlan(revision.source).plan;
  if (!plan) return refuse('NOT_FOUND');
  if (kept.size >= MAX_KEPT) {
    const oldest = kept.keys().next().value;
    if (oldest !== undefined) kept.delete(oldest);
  }
  kept.set(revisionId, plan);
  return plan;
}
