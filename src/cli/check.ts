import { parseArgs } from 'node:util';

import { defaultFit } from '#lib/plan/check-fit.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import { readPlan } from './read-plan.ts';
import { exitCodeOf, makeReport, resolvedProblems, writeJson, writeProblems } from './report.ts';
import { guardUse, WrongUse } from './wrong-use.ts';

/** `plan check FILE`: reads a plan, resolves it at its defaults, and tells every problem. @returns the exit code */
export function runCheck(args: string[]): number {
  return guardUse('plan check FILE [--json]', () => {
    const { values, positionals } = parseArgs({
      args,
      allowPositionals: true,
      options: { json: { type: 'boolean' } },
    });
    const [path, ...surplus] = positionals;
    if (path === undefined || surplus.length > 0) throw new WrongUse('One file is wanted.');
    const { plan, problems } = readPlan(path);
    const resolved = plan && resolvePlan(plan, defaultFit(plan, 'mm'));
    const all = resolved ? [...problems, ...resolvedProblems(resolved)] : problems;
    if (values.json) writeJson(makeReport(plan?.front.title ?? '', all, resolved));
    else {
      writeProblems(path, all);
      if (exitCodeOf(all) === 0)
        process.stdout.write(`${path} is clean: ${resolved?.parts.length ?? 0} parts.\n`);
    }
    return exitCodeOf(all);
  });
}
