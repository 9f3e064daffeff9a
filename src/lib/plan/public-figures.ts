import { given } from './given.ts';
import type { ChoiceOption, ResolvedPlan, ResolvedSize, UnitSystem } from './types.ts';

/** A material as a visitor sees it: what to buy, never what is cut from it. */
export interface PublicMaterial {
  name: string;
  label: string;
  kind: 'sheet' | 'board' | 'bar';
  species?: string;
  /** Nominal thickness in nanometres, and whether a buyer may enter the real one. */
  nominal: number;
  measured: boolean;
  /** Stock sizes in nanometres, [length, width] or [length]. */
  sizes: number[][];
  /** Totals in the measure that the material is sold by, to a tenth, so that no part size can be worked back out of them. */
  leastStock: number;
  /** Of sheets, of boards, of bars. */
  areaM2?: number;
  boardFeet?: number;
  lengthM?: number;
  price?: { minor: number; currency: string; per: string };
  costMinor?: number;
}

/** Everything of a plan at one fit that may be seen before paying, and nothing else. */
export interface PublicFigures {
  title: string;
  units: UnitSystem;
  sizes: ResolvedSize[];
  choices: {
    name: string;
    label: string;
    kind: 'length' | 'number' | 'text';
    value: number | string;
    options: ChoiceOption[];
  }[];
  /** Overall finished size in nanometres. */
  overall?: { width: number; depth: number; height: number };
  materials: PublicMaterial[];
  hardware: {
    name: string;
    qty: number;
    unit?: string;
    pack?: number;
    packs: number;
    costMinor?: number;
    currency?: string;
  }[];
  consumables: {
    name: string;
    coats: number;
    amount: number;
    unit: string;
    costMinor?: number;
    currency?: string;
  }[];
  /** Estimated cost by currency, in minor units. */
  costs: { currency: string; minor: number }[];
  massKg?: number;
  requirements: { holds: boolean; message: string }[];
  /** Topics and the author's words of warning, which nobody should have to pay for. */
  cautions: { about: string; text: string }[];
  steps: { number: number; title: string }[];
  tools: { name: string; link?: string; sponsored: boolean }[];
  /** True when every requirement holds and every part can be made. */
  canBeBuilt: boolean;
}

/** Up to a tenth: what a shopping list needs, and too coarse to work a part size back from. */
function roundTotal(value: number): number {
  return Math.ceil(value * 10 - 1e-9) / 10;
}

/**
 * What a visitor may see of a resolved plan: sizes with their limits, overall size, totals of materials and hardware, cost,
 * requirement results, cautions, step titles and tools. Each field is named here one by one, so that a new field of a
 * resolved plan stays hidden until somebody decides otherwise. No part size, position, formula or step text is in it.
 */
export function publicFigures(resolved: ResolvedPlan): PublicFigures {
  return {
    title: resolved.title,
    units: resolved.units,
    sizes: resolved.sizes.map(({ name, label, kind, value, default: initial, min, max, step }) => ({
      name,
      label,
      kind,
      value,
      default: initial,
      min,
      max,
      step,
    })),
    choices: resolved.choices.map(({ name, label, kind, value, options }) => ({
      name,
      label,
      kind,
      value,
      options: options.map((option) => ({ value: option.value, label: option.label })),
    })),
    ...given('overall', resolved.overall && { ...resolved.overall }),
    materials: resolved.materials.map((material) => ({
      name: material.name,
      label: material.label,
      kind: material.kind,
      ...given('species', material.species),
      nominal: material.nominal,
      measured: material.measured,
      sizes: material.sizes.map((size) => [...size]),
      leastStock: material.leastStock,
      ...(material.kind === 'sheet' && { areaM2: roundTotal(material.areaM2) }),
      ...(material.kind === 'board' && { boardFeet: roundTotal(material.boardFeet) }),
      ...(material.kind === 'bar' && { lengthM: roundTotal(material.lengthM) }),
      ...given('price', material.price && { ...material.price }),
      ...given('costMinor', material.costMinor),
    })),
    hardware: resolved.hardware.map((item) => ({
      name: item.name,
      qty: item.qty,
      ...given('unit', item.unit),
      ...given('pack', item.pack),
      packs: item.packs,
      ...given('costMinor', item.costMinor),
      ...given('currency', item.price?.currency),
    })),
    consumables: resolved.consumables.map((item) => ({
      name: item.name,
      coats: item.coats,
      amount: roundTotal(item.amount),
      unit: item.unit,
      ...given('costMinor', item.costMinor),
      ...given('currency', item.price?.currency),
    })),
    costs: resolved.costs.map(({ currency, minor }) => ({ currency, minor })),
    ...given('massKg', resolved.massKg === undefined ? undefined : Math.round(resolved.massKg * 10) / 10),
    requirements: resolved.requirements.map(({ holds, message }) => ({ holds, message })),
    cautions: resolved.cautions.map(({ about, text }) => ({ about, text })),
    steps: resolved.steps.map(({ number, title }) => ({ number, title })),
    tools: resolved.tools.map(({ name, link, sponsored }) => ({ name, ...given('link', link), sponsored })),
    canBeBuilt:
      resolved.requirements.every((requirement) => requirement.holds) &&
      resolved.problems.every((problem) => problem.severity !== 'error'),
  };
}
