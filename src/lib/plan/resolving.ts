import { MAX_LENGTH_NM } from '#lib/units/length.ts';

import { namesRead } from './dependencies.ts';
import { isIncluded, roundKept, runOf, valueOf } from './evaluate.ts';
import type { Program } from './evaluate.ts';
import { printValue } from './print-value.ts';
import { quoteSource } from './problems.ts';
import type { Finding, ProblemList } from './problems.ts';
import type { CompiledPlan, Expression, Formula, Kind, UnitSystem, Value } from './types.ts';

/** What working out one fit carries along. */
export interface Resolving {
  plan: CompiledPlan;
  program: Program;
  slots: Float64Array;
  units: UnitSystem;
  problems: ProblemList;
  /** Prices of the buyer by material, in minor units. */
  prices: ReadonlyMap<string, number>;
  /** Names of materials whose thickness the buyer measured. */
  measured: ReadonlySet<string>;
  /** Their thicknesses in nanometres by slot. */
  thicknesses: ReadonlyMap<number, number>;
}

/** Numbers beyond this are no quantities of a piece of furniture. */
const MAX_NUMBER = 1e12;

/** The largest magnitude that a kind may have: 1 km, its square and cube, and a million million of anything else. */
function limitOf(kind: Kind): number {
  if (kind === 'length') return MAX_LENGTH_NM;
  if (kind === 'area') return MAX_LENGTH_NM ** 2;
  if (kind === 'volume') return MAX_LENGTH_NM ** 3;
  return MAX_NUMBER;
}

/** What is wrong with a number of a kind, or null. */
export function faultOf(kind: Kind, value: number): Finding | null {
  if (!Number.isFinite(value))
    return {
      rule: 'not-finite',
      message: 'is not a finite number',
      hint: 'Check for a division by zero or the root of a negative value.',
    };
  if (Math.abs(value) <= limitOf(kind)) return null;
  return {
    rule: 'beyond-limit',
    message: kind === 'length' ? 'is longer than 1 km' : 'is too large',
    hint: 'Check the units of its formula.',
  };
}

/** Sizes, choices and measured thicknesses that a formula depends on, through everything between, in the order of the file. */
function rootsOf(expression: Expression, resolving: Resolving): { name: string; kind: Kind; slot: number }[] {
  const { program, measured } = resolving;
  const steps = new Map(program.steps.map((step) => [step.key, step]));
  const inputs = new Map(program.inputs.map((input) => [input.declaration.name, input]));
  const seen = new Set<string>();
  const stack = namesRead(expression);
  for (let name = stack.pop(); name !== undefined; name = stack.pop()) {
    if (seen.has(name)) continue;
    seen.add(name);
    const step = steps.get(name);
    if (step) stack.push(...namesRead(step.formula.expression));
  }
  const roots: { name: string; kind: Kind; slot: number }[] = [];
  for (const [name, { declaration, slot }] of inputs)
    if (seen.has(name)) roots.push({ name, kind: declaration.kind, slot });
  for (const material of measured) {
    const step = steps.get(`${material}.thickness`);
    if (step && seen.has(step.key)) roots.push({ name: step.key, kind: 'length', slot: step.slot });
  }
  return roots;
}

/** `with width 600 mm, bays 5`: the sizes that led to a value, or empty where it depends on none. */
function describeRoots(formula: Formula, resolving: Resolving): string {
  const { program, slots, units } = resolving;
  const told = rootsOf(formula.expression, resolving).map(({ name, kind, slot }) => {
    const number = slots[slot] ?? 0;
    const value = kind === 'text' ? (program.texts[number] ?? '') : number;
    return `${name} ${printValue(kind, value, units)}`;
  });
  return told.length === 0 ? '' : `with ${told.join(', ')}`;
}

/** Adds a problem at a formula, with its text, its value and the sizes that led there. */
export function reportFormula(
  resolving: Resolving,
  name: string,
  formula: Formula,
  finding: Finding & { value?: string },
): void {
  const { value, ...rest } = finding;
  const roots = describeRoots(formula, resolving);
  resolving.problems.add(formula.at, {
    ...rest,
    message: `${finding.message} (${name}={${quoteSource(formula.text)}}${roots && `, ${roots}`}).`,
    ...(value !== undefined && { found: value }),
  });
}

/** One number of a formula that is not kept under a name; a fault is reported and gives 0. */
export function numberOf(resolving: Resolving, what: string, name: string, formula: Formula): number {
  const { kind } = formula.expression;
  const value = roundKept(kind, runOf(formula.expression, resolving.program)(resolving.slots));
  const fault = faultOf(kind, value);
  if (fault === null) return value;
  // What it reads may be in error already; then the first report is enough.
  const isInherited = namesRead(formula.expression).some((read) => {
    const slot = resolving.program.slotOf.get(read);
    return slot !== undefined && !Number.isFinite(resolving.slots[slot]);
  });
  if (!isInherited)
    reportFormula(resolving, name, formula, { ...fault, message: `${what}: ${name} ${fault.message}` });
  return 0;
}

/** A formula's value of any kind as plain data; numbers in it that are not finite are reported and become 0. */
export function dataOf(resolving: Resolving, what: string, name: string, formula: Formula): Value {
  const { kind } = formula.expression;
  if (kind === 'text' || kind === 'yesno')
    return valueOf(formula.expression, resolving.program, resolving.slots);
  if (typeof kind === 'string') return numberOf(resolving, what, name, formula);
  const clean = (value: Value): Value => {
    if (typeof value === 'number') {
      const fault = faultOf('length', value);
      if (fault === null) return value;
      reportFormula(resolving, name, formula, { ...fault, message: `${what}: ${name} ${fault.message}` });
      return 0;
    }
    return typeof value === 'object' ? value.map(clean) : value;
  };
  return clean(valueOf(formula.expression, resolving.program, resolving.slots));
}

/** A kept number by its key; what is not finite was reported where it arose and counts as 0. */
export function keptNumber(resolving: Resolving, key: string): number {
  const slot = resolving.program.slotOf.get(key);
  const value = slot === undefined ? 0 : (resolving.slots[slot] ?? 0);
  return Number.isFinite(value) ? value : 0;
}

/** True where a component is not left out. */
export function isPresent(resolving: Resolving, declaration: { when?: Formula }): boolean {
  return isIncluded(declaration.when, resolving.program, resolving.slots);
}
