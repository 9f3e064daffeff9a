import { parseArgs } from 'node:util';

import { resolvePlan } from '#lib/plan/resolve.ts';
import { FIT_OPTIONS, readFit, readUnits } from './fit-flags.ts';
import { partsCsv, partsTable } from './parts-text.ts';
import { readPlan } from './read-plan.ts';
import { exitCodeOf, makeReport, resolvedProblems, writeJson, writeProblems } from './report.ts';
import { guardUse, WrongUse } from './wrong-use.ts';

const USAGE =
  'plan resolve FILE [--set width=900mm …] [--measured ply=17.6mm …] [--units mm|in] [--json|--csv|--table]';

/** `plan resolve FILE`: works a plan out at one fit and gives its parts as JSON, CSV or a table. @returns the exit code */
export function runResolve(args: string[]): number {
  return guardUse(USAGE, () => {
    const { values, positionals } = parseArgs({
      args,
      allowPositionals: true,
      options: {
        ...FIT_OPTIONS,
        json: { type: 'boolean' },
        csv: { type: 'boolean' },
        table: { type: 'boolean' },
      },
    });
    const [path, ...surplus] = positionals;
    if (path === undefined || surplus.length > 0) throw new WrongUse('One file is wanted.');
    if ([values.json, values.csv, values.table].filter(Boolean).length > 1)
      throw new WrongUse('Only one of --json, --csv and --table.');
    readUnits(values.units);
    const { plan, problems } = readPlan(path);
    const flagged = plan && readFit(plan, values);
    const resolved = plan && flagged?.problems.length === 0 ? resolvePlan(plan, flagged.fit) : null;
    const all = [...problems, ...(flagged?.problems ?? []), ...(resolved ? resolvedProblems(resolved) : [])];
    if (values.json) writeJson(makeReport(plan?.front.title ?? '', all, resolved));
    else {
      writeProblems(path, all);
      if (resolved) process.stdout.write(values.csv ? partsCsv(resolved) : partsTable(resolved));
    }
    return exitCodeOf(all);
  });
}
