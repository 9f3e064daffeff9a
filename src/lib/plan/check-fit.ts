import * as z from 'zod';

import { formatLength } from '#lib/units/format-length.ts';
import { formatAngle, formatNumber } from '#lib/units/format-measure.ts';
import { MAX_LENGTH_NM } from '#lib/units/length.ts';
import type { UnitSystem } from '#lib/units/length.ts';

import { RELATIVE_SLACK } from './functions.ts';
import { suggestName } from './suggest.ts';
import type { CompiledPlan, Fit, Kind, SizeDeclaration } from './types.ts';

/** Something in a fit that cannot be taken: `name` is the size, choice or material, or the field of the fit. */
export interface FitProblem {
  name: string;
  rule:
    | 'unknown-name'
    | 'out-of-limits'
    | 'off-step'
    | 'not-an-option'
    | 'wrong-kind'
    | 'not-measured'
    | 'malformed';
  message: string;
  hint?: string;
}

export type CheckedFit = { ok: true; fit: Fit } | { ok: false; problems: FitProblem[] };

/** Thickness of anything that a buyer measures, in nanometres: from 0.1 mm to 300 mm. */
const MEASURED_LIMITS = { min: 100_000, max: 300_000_000 };

const finite = z.number().min(-MAX_LENGTH_NM).max(MAX_LENGTH_NM);
const names = z.string().max(60);

/** The shape of a fit as it comes from outside; what the plan allows is checked against the plan. */
export const fitSchema = z.strictObject({
  values: z.record(names, z.union([finite, z.string().max(400)])).default({}),
  measured: z.record(names, finite).default({}),
  units: z.enum(['mm', 'in']),
  prices: z.record(names, z.number().int().min(0).max(100_000_000)).optional(),
});

/** A value in words, in the reader's units. */
function describe(kind: Kind, value: number, units: UnitSystem): string {
  if (kind === 'length') return formatLength(value, { units, denominator: 64 }).text;
  return kind === 'angle' ? formatAngle(value) : formatNumber(value);
}

/** The allowed value nearest to `value`: within the limits, and on the step where the size counts in whole numbers. */
export function clampToSize(size: SizeDeclaration, value: number): number {
  const within = Math.min(size.max, Math.max(size.min, value));
  if (size.kind !== 'number') return within;
  const steps = Math.round((within - size.min) / size.step);
  const snapped = size.min + steps * size.step;
  return snapped > size.max ? snapped - size.step : snapped;
}

/** True for a whole number of steps from the least value. */
function isOnStep(size: SizeDeclaration, value: number): boolean {
  const steps = (value - size.min) / size.step;
  return Math.abs(steps - Math.round(steps)) <= RELATIVE_SLACK * Math.max(1, Math.abs(steps));
}

function checkSize(size: SizeDeclaration, value: number | string, units: UnitSystem): FitProblem | null {
  const { name, label, min, max, kind } = size;
  if (typeof value !== 'number') {
    return {
      name,
      rule: 'wrong-kind',
      message: `${label} is a text, and ${kind === 'length' ? 'a length' : kind === 'angle' ? 'an angle' : 'a number'} is wanted.`,
    };
  }
  if (value < min || value > max) {
    return {
      name,
      rule: 'out-of-limits',
      message: `${label} can be ${describe(kind, min, units)} to ${describe(kind, max, units)}, not ${describe(kind, value, units)}.`,
      hint: `The nearest is ${describe(kind, clampToSize(size, value), units)}.`,
    };
  }
  if (kind === 'length' && !Number.isInteger(value)) {
    return { name, rule: 'wrong-kind', message: `${label} must be a whole number of nanometres.` };
  }
  if (kind === 'number' && !isOnStep(size, value)) {
    return {
      name,
      rule: 'off-step',
      message: `${label} goes in steps of ${formatNumber(size.step)} from ${formatNumber(min)}, and ${formatNumber(value)} is none of them.`,
      hint: `The nearest is ${formatNumber(clampToSize(size, value))}.`,
    };
  }
  return null;
}

/**
 * Checks a fit from outside (a request, a saved fit, an address) against its plan. The rule: limits bind, and nothing is
 * silently moved. A value beyond its limits is refused, with the nearest allowed one in the hint; so is a whole number
 * that is off its step, an unknown name, a text that is no option, a thickness that the plan lets nobody measure. A length or
 * an angle between two steps is taken as it is: a room is not built in steps, and `step` is only the notch of the control.
 * Used alike by the server and the browser.
 */
export function checkFit(plan: CompiledPlan, input: unknown): CheckedFit {
  const read = fitSchema.safeParse(input);
  if (!read.success) {
    const fields = [
      ...new Set(read.error.issues.slice(0, 20).map((issue) => issue.path.slice(0, 2).join('.') || 'fit')),
    ];
    return {
      ok: false,
      problems: fields.map((field) => ({
        name: field.split('.')[1] ?? field,
        rule: 'malformed',
        message: `${field} of the fit is not what it should be.`,
      })),
    };
  }
  const { values, measured, units, prices } = read.data;
  const problems: FitProblem[] = [];
  const inputs = new Map(
    plan.declarations.flatMap((each) =>
      each.type === 'size' || each.type === 'choice' ? [[each.name, each] as const] : [],
    ),
  );
  const materials = new Map(
    plan.declarations.flatMap((each) => (each.type === 'material' ? [[each.name, each] as const] : [])),
  );
  const unknown = (name: string, known: Iterable<string>, what: string): void => {
    const near = suggestName(name, known);
    problems.push({
      name,
      rule: 'unknown-name',
      message: `This plan has no ${what} “${name}”.`,
      ...(near && { hint: `Did you mean ${near}?` }),
    });
  };
  for (const [name, value] of Object.entries(values)) {
    const declaration = inputs.get(name);
    if (!declaration) unknown(name, inputs.keys(), 'size or choice');
    else if (declaration.type === 'size') {
      const problem = checkSize(declaration, value, units);
      if (problem) problems.push(problem);
    } else if (!declaration.options.some((option) => option.value === value)) {
      problems.push({
        name,
        rule: 'not-an-option',
        message: `${declaration.label} has no such option.`,
        hint: `Its options are ${declaration.options.map((option) => option.label).join(', ')}.`,
      });
    }
  }
  for (const [name, thickness] of Object.entries(measured)) {
    const material = materials.get(name);
    if (!material) unknown(name, materials.keys(), 'material');
    else if (!material.measured) {
      problems.push({
        name,
        rule: 'not-measured',
        message: `The thickness of ${material.label} is fixed in this plan.`,
      });
    } else if (
      !Number.isInteger(thickness) ||
      thickness < MEASURED_LIMITS.min ||
      thickness > MEASURED_LIMITS.max
    ) {
      problems.push({
        name,
        rule: 'out-of-limits',
        message: `The thickness of ${material.label} can be ${describe('length', MEASURED_LIMITS.min, units)} to ${describe('length', MEASURED_LIMITS.max, units)}.`,
      });
    }
  }
  for (const name of Object.keys(prices ?? {}))
    if (!materials.has(name)) unknown(name, materials.keys(), 'material');
  if (problems.length > 0) return { ok: false, problems };
  const fit: Fit = { values, measured, units };
  if (prices) fit.prices = prices;
  return { ok: true, fit };
}

/** The fit that a plan opens with: every size and choice at its default, nothing measured. */
export function defaultFit(plan: CompiledPlan, units: UnitSystem): Fit {
  const values: Record<string, number | string> = {};
  for (const declaration of plan.declarations) {
    if (declaration.type === 'size' || declaration.type === 'choice')
      values[declaration.name] = declaration.default;
  }
  return { values, measured: {}, units };
}
