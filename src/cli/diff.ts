import { parseArgs } from 'node:util';

import { comparePlans } from '#lib/plan/compare.ts';
import { FIT_OPTIONS, readFit } from './fit-flags.ts';
import { readPlan } from './read-plan.ts';
import { exitCodeOf, makeReport, writeJson, writeProblems } from './report.ts';
import { guardUse, WrongUse } from './wrong-use.ts';

/** `plan diff OLD NEW`: what changes between two files at one fit of the older. @returns the exit code */
export function runDiff(args: string[]): number {
  return guardUse('plan diff OLD NEW [--set width=900mm …] [--units mm|in] [--json]', () => {
    const { values, positionals } = parseArgs({
      args,
      allowPositionals: true,
      options: { ...FIT_OPTIONS, json: { type: 'boolean' } },
    });
    const [oldPath, newPath, ...surplus] = positionals;
    if (oldPath === undefined || newPath === undefined || surplus.length > 0)
      throw new WrongUse('Two files are wanted.');
    const [before, after] = [readPlan(oldPath), readPlan(newPath)];
    const flagged = before.plan && readFit(before.plan, values);
    const problems = [...before.problems, ...after.problems, ...(flagged?.problems ?? [])].filter(
      (problem) => problem.severity === 'error',
    );
    const changes =
      before.plan && after.plan && flagged && problems.length === 0
        ? comparePlans(before.plan, after.plan, flagged.fit)
        : null;
    if (values.json)
      writeJson({
        title: makeReport(after.plan?.front.title ?? '', [], null).title,
        problems: makeReport('', problems, null).problems,
        changes: changes ?? [],
      });
    else {
      writeProblems(oldPath, before.problems);
      writeProblems(newPath, after.problems);
      writeProblems(oldPath, flagged?.problems ?? []);
      for (const { sentence } of changes ?? []) process.stdout.write(`${sentence}\n`);
      if (changes?.length === 0) process.stdout.write('Nothing changes at this fit.\n');
    }
    return exitCodeOf(problems);
  });
}
