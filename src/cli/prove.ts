import { parseArgs } from 'node:util';

import { provePlan } from '#lib/plan/prove.ts';
import type { ProofOutcome } from '#lib/plan/prove.ts';
import { readUnits } from './fit-flags.ts';
import { readPlan } from './read-plan.ts';
import { exitCodeOf, makeReport, writeJson, writeProblems } from './report.ts';
import { guardUse, WrongUse } from './wrong-use.ts';

const DEFAULT_TRIES = 4000;

function readCount(flag: string, text: string | undefined, fallback: number): number {
  if (text === undefined) return fallback;
  if (!/^\d{1,7}$/.test(text)) throw new WrongUse(`--${flag} is a whole number up to 9999999.`);
  return Number(text);
}

/** `plan prove FILE`: tries a plan over everything it allows. @returns the exit code: 1 when the plan or its proof fails */
export function runProve(args: string[]): number {
  return guardUse('plan prove FILE [--seed N] [--tries N] [--units mm|in] [--json]', () => {
    const { values, positionals } = parseArgs({
      args,
      allowPositionals: true,
      options: {
        seed: { type: 'string' },
        tries: { type: 'string' },
        units: { type: 'string' },
        json: { type: 'boolean' },
      },
    });
    const [path, ...surplus] = positionals;
    if (path === undefined || surplus.length > 0) throw new WrongUse('One file is wanted.');
    const options = {
      seed: readCount('seed', values.seed, 1),
      maxTries: readCount('tries', values.tries, DEFAULT_TRIES),
      units: readUnits(values.units),
    };
    const { plan, problems } = readPlan(path);
    let outcome: ProofOutcome | null = null;
    if (plan) {
      const run = provePlan(plan, options);
      let step = run.next();
      while (!step.done) step = run.next();
      outcome = step.value;
    }
    if (values.json) {
      writeJson({
        title: plan?.front.title ?? '',
        problems: makeReport('', problems, null).problems,
        ...(outcome ?? { holds: false }),
      });
    } else {
      writeProblems(path, problems);
      for (const sentence of outcome?.proved ?? []) process.stdout.write(`proved: ${sentence}\n`);
      for (const sentence of outcome?.tried ?? []) process.stdout.write(`tried: ${sentence}\n`);
      for (const { sentence } of outcome?.failures ?? []) process.stdout.write(`fails: ${sentence}\n`);
      if (outcome) process.stdout.write(outcome.holds ? 'The plan holds.\n' : 'The plan does not hold.\n');
    }
    return outcome?.holds ? exitCodeOf(problems) : 1;
  });
}
