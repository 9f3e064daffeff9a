import { parseArgs } from 'node:util';

import { resolvePlan } from '#lib/plan/resolve.ts';
import { layOutPlan } from '#lib/stock/from-plan.ts';
import { formatLength } from '#lib/units/format-length.ts';
import type { UnitSystem } from '#lib/units/length.ts';
import { parseLength } from '#lib/units/parse-length.ts';
import { FIT_OPTIONS, readFit, readUnits } from './fit-flags.ts';
import { readPlan } from './read-plan.ts';
import { exitCodeOf, makeReport, resolvedProblems, writeJson, writeProblems } from './report.ts';
import { guardUse, WrongUse } from './wrong-use.ts';

const USAGE =
  'plan layout FILE [--set width=900mm …] [--measured ply=17.6mm …] [--kerf 3.2mm] [--trim 10mm] [--steps N] [--seed N] [--rip-first] [--units mm|in] [--json]';

function readLength(flag: string, text: string, units: UnitSystem): number {
  const read = parseLength(text, units);
  if (!read.ok) throw new WrongUse(`--${flag}: ${read.message} ${read.hint}`);
  if (read.nm < 0) throw new WrongUse(`--${flag} cannot be negative.`);
  return read.nm;
}

function readCount(flag: string, text: string): number {
  if (!/^\d{1,8}$/.test(text)) throw new WrongUse(`--${flag} is a whole number up to 99999999.`);
  return Number(text);
}

/**
 * `plan layout FILE`: lays the parts of a plan out on its stock at one fit. Lengths in the JSON are whole nanometres.
 * @returns the exit code: 1 when the plan has problems or a part is not laid
 */
export function runLayoutPlan(args: string[]): number {
  return guardUse(USAGE, () => {
    const { values, positionals } = parseArgs({
      args,
      allowPositionals: true,
      options: {
        ...FIT_OPTIONS,
        kerf: { type: 'string', default: '3.2 mm' },
        trim: { type: 'string', default: '0 mm' },
        steps: { type: 'string', default: '20000' },
        seed: { type: 'string', default: '1' },
        'rip-first': { type: 'boolean', default: false },
        json: { type: 'boolean', default: false },
      },
    });
    const [path, ...surplus] = positionals;
    if (path === undefined || surplus.length > 0) throw new WrongUse('One file is wanted.');
    const units = readUnits(values.units);
    const settings = {
      kerfNm: readLength('kerf', values.kerf, units),
      trimNm: readLength('trim', values.trim, units),
      stock: [],
      isRipFirst: values['rip-first'],
    };
    const search = { steps: readCount('steps', values.steps), seed: readCount('seed', values.seed) };
    const { plan, problems } = readPlan(path);
    const flagged = plan && readFit(plan, values);
    const resolved = plan && flagged?.problems.length === 0 ? resolvePlan(plan, flagged.fit) : null;
    const all = [...problems, ...(flagged?.problems ?? []), ...(resolved ? resolvedProblems(resolved) : [])];
    const materials = resolved ? layOutPlan(resolved, settings, search) : [];
    if (values.json) {
      const told = materials.map(({ material, label, currency, layout }) => ({
        material,
        label,
        currency,
        ...layout,
      }));
      writeJson({
        title: plan?.front.title ?? '',
        problems: makeReport('', all, null).problems,
        layouts: told,
      });
    } else {
      writeProblems(path, all);
      for (const { label, layout } of materials) {
        const counts = new Map<string, number>();
        for (const { length, width } of layout.pieces) {
          const size = [length, width].filter((nm) => nm > 0).map((nm) => formatLength(nm, { units }).text);
          counts.set(size.join(' × '), (counts.get(size.join(' × ')) ?? 0) + 1);
        }
        const pieces = [...counts].map(([size, count]) => `${count} of ${size}`).join(', ');
        process.stdout.write(
          `${label}: ${pieces || 'nothing'}${layout.isProved ? ', no layout costs less' : ''}\n`,
        );
      }
    }
    const unplaced = materials.flatMap(({ layout }) => layout.unplaced);
    for (const { part, qty } of unplaced) process.stderr.write(`${path}: ${qty} of part ${part} not laid\n`);
    return unplaced.length > 0 ? 1 : exitCodeOf(all);
  });
}
