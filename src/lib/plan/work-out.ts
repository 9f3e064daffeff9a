import { clampToSize } from './check-fit.ts';
import { programOf, runSteps, valueOf } from './evaluate.ts';
import type { Program } from './evaluate.ts';
import { createProblemList } from './problems.ts';
import { faultOf, isPresent, reportFormula } from './resolving.ts';
import type { Resolving } from './resolving.ts';
import type { ChoiceDeclaration, CompiledPlan, Fit, RequireDeclaration, SizeDeclaration } from './types.ts';

/** A fit's own value under a name; never something inherited by the object it came in. */
function ownValue<T>(record: Readonly<Record<string, T>> | undefined, name: string): T | undefined {
  return record && Object.hasOwn(record, name) ? record[name] : undefined;
}

function inputOf(
  declaration: SizeDeclaration | ChoiceDeclaration,
  fit: Fit,
): { value: number | string; isRefused: boolean } {
  const given = ownValue(fit.values, declaration.name);
  if (given === undefined) return { value: declaration.default, isRefused: false };
  if (declaration.type === 'choice') {
    const isOption = declaration.options.some((option) => option.value === given);
    return isOption ? { value: given, isRefused: false } : { value: declaration.default, isRefused: true };
  }
  if (typeof given !== 'number' || !Number.isFinite(given))
    return { value: declaration.default, isRefused: true };
  const value = clampToSize(declaration, declaration.kind === 'length' ? Math.round(given) : given);
  // A length that is not whole is rounded, which is no refusal.
  const isRefused = declaration.kind === 'number' ? value !== given : Math.abs(value - given) >= 1;
  return { value, isRefused };
}

/**
 * Sets sizes and choices from a fit and works every kept value out: what resolving, the tape and the range proof begin with.
 * What could not be taken, and values that are not finite, are in `problems`.
 */
export function workOut(plan: CompiledPlan, fit: Fit): Resolving {
  const program = programOf(plan);
  const slots = new Float64Array(program.size);
  const problems = createProblemList();
  for (const { declaration, slot } of program.inputs) {
    const { value, isRefused } = inputOf(declaration, fit);
    slots[slot] = typeof value === 'string' ? program.textNumber(value) : value;
    if (isRefused) {
      problems.add(declaration.at, {
        rule: 'fit-refused',
        severity: 'warning',
        message: `“${declaration.name}” cannot be set so; the nearest allowed value stands in its place.`,
      });
    }
  }
  const measured = new Map<number, number>();
  const measuredNames = new Set<string>();
  for (const declaration of plan.declarations) {
    if (declaration.type !== 'material' || !declaration.measured) continue;
    const thickness = ownValue(fit.measured, declaration.name);
    const slot = program.slotOf.get(`${declaration.name}.thickness`);
    if (slot === undefined || typeof thickness !== 'number' || !(thickness > 0) || thickness > 1e12) continue;
    measured.set(slot, Math.round(thickness));
    measuredNames.add(declaration.name);
  }
  runSteps(program, slots, measured);
  const prices = new Map(Object.entries(fit.prices ?? {}));
  const resolving: Resolving = {
    plan,
    program,
    slots,
    units: fit.units,
    problems,
    prices,
    measured: measuredNames,
    thicknesses: measured,
  };
  reportFaults(program, resolving);
  return resolving;
}

/** Reports kept values that are not finite or too large, each where it arises and not again where it is used. */
function reportFaults(program: Program, resolving: Resolving): void {
  const { slots } = resolving;
  for (const { key, kind, slot, run, reads, formula, declaration } of program.steps) {
    if (run === null) continue;
    const fault = faultOf(kind, slots[slot] ?? NaN);
    if (fault === null || reads.some((read) => !Number.isFinite(slots[read]))) continue;
    const what =
      declaration.type === 'part'
        ? `Part ${declaration.mark} “${declaration.name}”`
        : declaration.type === 'let'
          ? `“${key}”`
          : `Material “${key.split('.')[0]}”`;
    const name = declaration.type === 'let' ? 'value' : (key.split('.')[1] ?? 'value');
    reportFormula(resolving, name, formula, {
      ...fault,
      message: declaration.type === 'let' ? `${what} ${fault.message}` : `${what}: ${name} ${fault.message}`,
    });
  }
}

/** The first requirement that is broken at the sizes worked out, or undefined when all hold. */
export function findBrokenRequirement(resolving: Resolving): RequireDeclaration | undefined {
  const { plan, program, slots } = resolving;
  for (const declaration of plan.declarations) {
    if (declaration.type !== 'require' || !isPresent(resolving, declaration)) continue;
    if (valueOf(declaration.that.expression, program, slots) !== true) return declaration;
  }
  return undefined;
}
