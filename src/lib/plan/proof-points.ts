import { NM_PER_MM, roundNm } from '#lib/units/length.ts';

import { clampToSize } from './check-fit.ts';
import type { ChoiceDeclaration, CompiledPlan, Fit, MaterialDeclaration, SizeDeclaration } from './types.ts';
import { programOf } from './evaluate.ts';

/** How far a sheet may really be from its nominal thickness: the proof tries measured ones this much thinner and thicker. */
const MEASURED_SPREAD = 0.06;

/** One thing that may be set: a size, or the real thickness of a measured material. */
export interface Dimension {
  name: string;
  type: 'size' | 'measured';
  kind: 'length' | 'angle' | 'number';
  min: number;
  max: number;
  default: number;
  step: number;
  size?: SizeDeclaration;
}

/** Everything that a plan lets a buyer set. */
export interface ProofSpace {
  dimensions: Dimension[];
  choices: ChoiceDeclaration[];
}

/** One point of that space: the options by choice, the numbers in the order of the dimensions. */
export interface Point {
  options: (number | string)[];
  numbers: number[];
}

/** The space of sizes, measured thicknesses and choices that a plan allows. */
export function proofSpace(plan: CompiledPlan, nominalOf: (material: string) => number): ProofSpace {
  const dimensions: Dimension[] = [];
  const choices: ChoiceDeclaration[] = [];
  const measured: MaterialDeclaration[] = [];
  for (const declaration of plan.declarations) {
    if (declaration.type === 'size') {
      const { name, kind, min, max, step } = declaration;
      dimensions.push({
        name,
        type: 'size',
        kind,
        min,
        max,
        default: declaration.default,
        step,
        size: declaration,
      });
    } else if (declaration.type === 'choice') choices.push(declaration);
    else if (declaration.type === 'material' && declaration.measured) measured.push(declaration);
  }
  for (const { name } of measured) {
    const nominal = nominalOf(name);
    if (!(nominal > 0)) continue;
    const spread = roundNm(nominal * MEASURED_SPREAD);
    dimensions.push({
      name,
      type: 'measured',
      kind: 'length',
      min: nominal - spread,
      max: nominal + spread,
      default: nominal,
      step: NM_PER_MM / 10,
    });
  }
  return { dimensions, choices };
}

/** The point at which a plan opens. */
export function defaultPoint(space: ProofSpace): Point {
  return {
    options: space.choices.map((choice) => choice.default),
    numbers: space.dimensions.map((dimension) => dimension.default),
  };
}

/** A point as a fit. */
export function fitOf(space: ProofSpace, point: Point, units: 'mm' | 'in' = 'mm'): Fit {
  const fit: Fit = { values: {}, measured: {}, units };
  space.choices.forEach((choice, index) => {
    fit.values[choice.name] = point.options[index] ?? choice.default;
  });
  space.dimensions.forEach((dimension, index) => {
    const number = point.numbers[index] ?? dimension.default;
    // A thickness at its nominal is not measured, so that a sentence need not tell it.
    if (dimension.type === 'size') fit.values[dimension.name] = number;
    else if (number !== dimension.default) fit.measured[dimension.name] = number;
  });
  return fit;
}

/** The value of a dimension nearest to `value`. */
export function settle(dimension: Dimension, value: number): number {
  const within = Math.min(dimension.max, Math.max(dimension.min, value));
  if (dimension.size)
    return clampToSize(dimension.size, dimension.kind === 'length' ? roundNm(within) : within);
  return roundNm(within);
}

/** A value of a dimension on its step, `share` of the way from least to greatest. */
export function stepAt(dimension: Dimension, share: number): number {
  const steps = Math.round((share * (dimension.max - dimension.min)) / dimension.step);
  return settle(dimension, dimension.min + steps * dimension.step);
}

/** Every combination of options where there are at most `most`; else a selection that has each option at least once. */
export function optionCombinations(
  space: ProofSpace,
  most: number,
  random: () => number,
): (number | string)[][] {
  const sizes = space.choices.map((choice) => choice.options.length);
  const total = sizes.reduce((product, size) => product * size, 1);
  const optionAt = (choice: number, index: number): number | string => {
    const { options, default: initial } = space.choices[choice] ?? { options: [], default: 0 };
    return options[index]?.value ?? initial;
  };
  if (total <= most) {
    return Array.from({ length: total }, (_, number) => {
      let rest = number;
      return sizes.map((size, choice) => {
        const index = rest % size;
        rest = Math.floor(rest / size);
        return optionAt(choice, index);
      });
    });
  }
  // Row k takes option k of each choice, shuffled by choice: each option occurs, and pairs vary.
  const offsets = sizes.map((size) => Math.floor(random() * size));
  return Array.from({ length: most }, (_, row) =>
    sizes.map((size, choice) =>
      optionAt(
        choice,
        row < Math.max(...sizes) ? (row + (offsets[choice] ?? 0)) % size : Math.floor(random() * size),
      ),
    ),
  );
}

/** The nominal thickness of each material at the defaults. */
export function nominalThicknesses(plan: CompiledPlan, slots: Float64Array): (material: string) => number {
  const { slotOf } = programOf(plan);
  return (material) => slots[slotOf.get(`${material}.thickness`) ?? -1] ?? 0;
}
