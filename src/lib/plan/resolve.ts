import { clampToSize, isOnStep } from './check-fit.ts';
import { programOf, runSteps, valueOf } from './evaluate.ts';
import type { Program } from './evaluate.ts';
import { overallSize } from './overall.ts';
import { createProblemList } from './problems.ts';
import { resolveParts } from './resolve-parts.ts';
import { plainText, resolveProse } from './resolve-prose.ts';
import { resolveConsumables, resolveHardware, resolveMaterials, sumCosts } from './resolve-stock.ts';
import { dataOf, faultOf, isPresent, numberOf, reportFormula } from './resolving.ts';
import type { Resolving } from './resolving.ts';
import type {
  ChoiceDeclaration,
  CompiledPlan,
  Fit,
  PlaceDeclaration,
  ResolvedChoice,
  ResolvedPlan,
  ResolvedProse,
  ResolvedSize,
  ResolvedStep,
  ResolvedTemplate,
  ResolvedView,
  SizeDeclaration,
  Value,
} from './types.ts';

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
  const isGood =
    value === given ||
    (declaration.kind !== 'number' && Math.abs(value - given) < 1) ||
    (isOnStep(declaration, given) && value === given);
  return { value, isRefused: !isGood };
}

/** Sets the slots of sizes and choices from a fit and works everything kept out. Reports what could not be taken. */
function workOut(plan: CompiledPlan, fit: Fit): Resolving {
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

function resolveInputs(resolving: Resolving): { sizes: ResolvedSize[]; choices: ResolvedChoice[] } {
  const { program, slots } = resolving;
  const sizes: ResolvedSize[] = [];
  const choices: ResolvedChoice[] = [];
  for (const { declaration, slot } of program.inputs) {
    if (!isPresent(resolving, declaration)) continue;
    const number = slots[slot] ?? 0;
    if (declaration.type === 'size') {
      const { name, label, kind, min, max, step } = declaration;
      sizes.push({ name, label, kind, value: number, default: declaration.default, min, max, step });
    } else {
      const { name, label, kind, options } = declaration;
      choices.push({
        name,
        label,
        kind,
        value: kind === 'text' ? (program.texts[number] ?? '') : number,
        options: options.map((option) => ({ ...option })),
      });
    }
  }
  return { sizes, choices };
}

function resolveValues(resolving: Resolving): ResolvedPlan['values'] {
  const { program, slots } = resolving;
  return resolving.plan.declarations.flatMap((declaration) => {
    if (declaration.type !== 'let' || !isPresent(resolving, declaration)) return [];
    const { name, note, value: formula } = declaration;
    const { kind } = formula.expression;
    const slot = program.slotOf.get(name) ?? 0;
    const number = slots[slot] ?? 0;
    let value: Value;
    if (typeof kind !== 'string') value = dataOf(resolving, `“${name}”`, 'value', formula);
    else if (kind === 'text') value = program.texts[number] ?? '';
    else if (kind === 'yesno') value = number !== 0;
    else value = Number.isFinite(number) ? number : 0;
    return [{ name, kind, value, ...(note !== undefined && { note }) }];
  });
}

const APPENDED: readonly PlaceDeclaration['type'][] = [
  'parts-table',
  'stock-layout',
  'hardware-table',
  'shopping-list',
];

/** The body with the tables that the author left out appended, so that no plan lacks its parts table. */
function withTables(body: ResolvedProse, plan: CompiledPlan): ResolvedProse {
  const placed = new Set<string>(plan.declarations.map((declaration) => declaration.type));
  const missing = APPENDED.filter((type) => !placed.has(type));
  return [...body, ...missing.map((what) => ({ node: 'place' as const, what, index: -1 }))];
}

/**
 * Works a plan out at one fit: sizes, derived values, parts with finished sizes, materials and hardware with totals and
 * costs, requirements, cautions and steps with their values. Pure and deterministic, alike in Node and in the browser;
 * keeps the order of the file. Each kept length is rounded once, to the nearest nanometre.
 *
 * A broken requirement does not stop resolving. What cannot be made or bought (a part of no length, larger than its stock,
 * a groove deeper than its part, a value that is not finite) is in `problems`, which name the part, the formula, its value and
 * the sizes that led there. A fit is taken as `checkFit` lets it through; what would not pass is brought to the nearest
 * allowed value and noted as a warning.
 */
export function resolvePlan(plan: CompiledPlan, fit: Fit): ResolvedPlan {
  const resolving = workOut(plan, fit);
  const { program, slots, units } = resolving;
  const parts = resolveParts(resolving);
  const materials = resolveMaterials(resolving, parts);
  const hardware = resolveHardware(resolving);
  const consumables = resolveConsumables(resolving, parts);
  const cut = new Set(parts.map((part) => part.mark));

  const stepNumbers = new Map<number, number>();
  plan.declarations.forEach((declaration, index) => {
    if (declaration.type === 'step' && isPresent(resolving, declaration))
      stepNumbers.set(index, stepNumbers.size + 1);
  });

  const resolved: ResolvedPlan = {
    title: plan.front.title,
    units,
    ...resolveInputs(resolving),
    values: resolveValues(resolving),
    parts,
    materials,
    hardware,
    consumables,
    tools: [],
    requirements: [],
    cautions: [],
    shelves: [],
    steps: [],
    views: [],
    templates: [],
    body: withTables(resolveProse(plan.body, resolving, stepNumbers), plan),
    costs: sumCosts(materials, hardware, consumables),
    problems: [],
  };
  plan.declarations.forEach((declaration, index) => {
    if (!isPresent(resolving, declaration)) return;
    switch (declaration.type) {
      case 'tool': {
        const { name, note, link, sponsored } = declaration;
        resolved.tools.push({
          name,
          sponsored,
          ...(note !== undefined && { note }),
          ...(link !== undefined && { link }),
        });
        break;
      }
      case 'require':
        resolved.requirements.push({
          holds: valueOf(declaration.that.expression, program, slots) === true,
          message: plainText(resolveProse(declaration.message, resolving, stepNumbers)),
          at: declaration.at,
        });
        break;
      case 'caution':
        resolved.cautions.push({
          about: declaration.about,
          text: plainText(resolveProse(declaration.text, resolving, stepNumbers)),
        });
        break;
      case 'step': {
        const step: ResolvedStep = {
          number: stepNumbers.get(index) ?? 0,
          title: declaration.title,
          parts: declaration.parts.filter((mark) => cut.has(mark)),
          tools: [...declaration.tools],
          body: resolveProse(declaration.body, resolving, stepNumbers),
        };
        if (declaration.minutes !== undefined) step.minutes = declaration.minutes;
        resolved.steps.push(step);
        break;
      }
      case 'view': {
        const view: ResolvedView = {
          index,
          from: declaration.from,
          show: declaration.show.filter((mark) => cut.has(mark)),
        };
        if (declaration.explode) view.explode = numberOf(resolving, 'View', 'explode', declaration.explode);
        if (declaration.step !== undefined) view.step = declaration.step;
        resolved.views.push(view);
        break;
      }
      case 'template': {
        const template: ResolvedTemplate = { index, part: declaration.part, scale: declaration.scale ?? 1 };
        if (cut.has(declaration.part)) resolved.templates.push(template);
        break;
      }
    }
  });
  const overall = overallSize(parts);
  if (overall) resolved.overall = overall;
  resolved.problems = resolving.problems.items;
  return resolved;
}
