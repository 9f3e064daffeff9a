import { valueOf } from './evaluate.ts';
import { overallSize } from './overall.ts';
import { resolveShelves, totalMass } from './resolve-load.ts';
import { resolveParts } from './resolve-parts.ts';
import { plainText, resolveProse } from './resolve-prose.ts';
import { resolveConsumables, resolveHardware, resolveMaterials, sumCosts } from './resolve-stock.ts';
import { dataOf, isPresent, numberOf } from './resolving.ts';
import type { Resolving } from './resolving.ts';
import { workOut } from './work-out.ts';
import type {
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
  Value,
} from './types.ts';

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
    shelves: resolveShelves(resolving, parts, materials),
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
  const massKg = totalMass(materials);
  if (massKg !== undefined) resolved.massKg = massKg;
  resolved.problems = resolving.problems.items;
  return resolved;
}
