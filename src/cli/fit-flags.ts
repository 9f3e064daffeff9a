import { checkFit, defaultFit } from '#lib/plan/check-fit.ts';
import type { ChoiceDeclaration, CompiledPlan, Fit, Problem, SizeDeclaration } from '#lib/plan/types.ts';
import type { UnitSystem } from '#lib/units/length.ts';
import { parseAngle } from '#lib/units/parse-angle.ts';
import { parseLength } from '#lib/units/parse-length.ts';
import { WrongUse } from './wrong-use.ts';

/** The flags that set a fit, for `parseArgs`. */
export const FIT_OPTIONS = {
  set: { type: 'string', multiple: true },
  measured: { type: 'string', multiple: true },
  units: { type: 'string' },
} as const;

export interface FitFlags {
  set?: string[] | undefined;
  measured?: string[] | undefined;
  units?: string | undefined;
}

/** What the flags come to: the fit, and what of it the plan refuses. */
export interface FlaggedFit {
  fit: Fit;
  problems: Problem[];
}

/** Reads `--units`. @throws WrongUse for anything but mm and in */
export function readUnits(units: string | undefined): UnitSystem {
  if (units === undefined || units === 'mm') return 'mm';
  if (units === 'in') return 'in';
  throw new WrongUse(`--units is mm or in, not ${units}.`);
}

function split(flag: string, text: string): [name: string, value: string] {
  const at = text.indexOf('=');
  if (at < 1) throw new WrongUse(`--${flag} is written name=value, not ${text}.`);
  return [text.slice(0, at).trim(), text.slice(at + 1).trim()];
}

function problemOf(
  flag: string,
  name: string,
  message: string,
  hint?: string,
  rule = 'fit-refused',
): Problem {
  return {
    line: 1,
    column: 1,
    length: 1,
    rule,
    severity: 'error',
    message: `--${flag} ${name}: ${message}`,
    ...(hint !== undefined && { hint }),
  };
}

function readValue(
  declaration: SizeDeclaration | ChoiceDeclaration,
  text: string,
  units: UnitSystem,
): number | string | Problem {
  const { name, kind } = declaration;
  if (declaration.type === 'choice') {
    const named = declaration.options.find((option) => option.value === text || option.label === text);
    if (named) return named.value;
    if (kind === 'text') return text;
  }
  if (kind === 'length') {
    const read = parseLength(text, units);
    return read.ok ? read.nm : problemOf('set', name, read.message, read.hint);
  }
  if (kind === 'angle') {
    const read = parseAngle(text);
    return read.ok ? read.degrees : problemOf('set', name, read.message, read.hint);
  }
  const number = /^-?\d{1,9}(\.\d{1,9})?$/.test(text) ? Number(text) : NaN;
  return Number.isFinite(number) ? number : problemOf('set', name, `“${text}” is not a number.`);
}

/** Reads `--set`, `--measured` and `--units` against a plan. @throws WrongUse when a flag is not written name=value */
export function readFit(plan: CompiledPlan, flags: FitFlags): FlaggedFit {
  const units = readUnits(flags.units);
  const problems: Problem[] = [];
  const values: Record<string, number | string> = {};
  const measured: Record<string, number> = {};
  for (const text of flags.set ?? []) {
    const [name, value] = split('set', text);
    const declaration = plan.declarations.find(
      (each): each is SizeDeclaration | ChoiceDeclaration =>
        (each.type === 'size' || each.type === 'choice') && each.name === name,
    );
    const read = declaration ? readValue(declaration, value, units) : value;
    if (typeof read === 'object') problems.push(read);
    else values[name] = read;
  }
  for (const text of flags.measured ?? []) {
    const [name, value] = split('measured', text);
    const read = parseLength(value, units);
    if (read.ok) measured[name] = read.nm;
    else problems.push(problemOf('measured', name, read.message, read.hint));
  }
  const checked = checkFit(plan, { values, measured, units });
  if (checked.ok && problems.length === 0)
    return {
      fit: {
        ...defaultFit(plan, units),
        ...checked.fit,
        values: { ...defaultFit(plan, units).values, ...checked.fit.values },
      },
      problems,
    };
  if (!checked.ok) {
    for (const problem of checked.problems) {
      const flag =
        Object.hasOwn(measured, problem.name) && !Object.hasOwn(values, problem.name) ? 'measured' : 'set';
      problems.push(problemOf(flag, problem.name, problem.message, problem.hint, problem.rule));
    }
  }
  return { fit: defaultFit(plan, units), problems };
}
