import { checkFit } from '#lib/plan/check-fit.ts';
import type { Fit } from '#lib/plan/types.ts';
import { refuse } from '../errors.ts';
import { getCompiledPlan } from '../publishing/get-compiled-plan.ts';

/**
 * Checks a fit that came from outside against the limits of one revision, by the rule that the page uses too.
 * @throws BAD_INPUT naming each size at fault
 */
export async function requireFit(revisionId: string, input: unknown): Promise<Fit> {
  const checked = checkFit(await getCompiledPlan(revisionId), input);
  if (checked.ok) return checked.fit;
  const fields = Object.fromEntries(checked.problems.map((problem) => [problem.name, problem.message]));
  return refuse('BAD_INPUT', {
    detail: checked.problems.map((problem) => problem.message).join(' '),
    fields,
  });
}
