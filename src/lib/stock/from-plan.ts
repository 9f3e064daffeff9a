import type { ResolvedMaterial, ResolvedPart, ResolvedPlan, WrittenPrice } from '../plan/types.ts';
import { clearStretches } from './bar-model.ts';
import { layOut } from './lay-out.ts';
import type {
  BarStock,
  Defect,
  LayOutOptions,
  Layout,
  SheetPart,
  SheetStock,
  StockProblem,
  Trim,
} from './types.ts';

/** A piece that the buyer has already: an offcut, a board from the rack, a length of bar. Nanometres. */
export interface OwnStock {
  material: string;
  lengthNm: number;
  /** Left out for bars. */
  widthNm?: number;
  count: number;
  /** Stretches along its length that cannot be used. */
  defects?: Defect[];
}

/** How the buyer cuts. */
export interface CuttingSettings {
  kerfNm: number;
  /** Taken off each edge of bought stock; the buyer's own pieces are used to their edges. */
  trimNm: number;
  stock: readonly OwnStock[];
  /** The buyer's own prices by material, in minor units of the written price. */
  prices?: Readonly<Record<string, number>>;
  /** Rips first, at most three stages: what a table saw likes best. Boards are always cut so. */
  isRipFirst?: boolean;
}

/** The problem of one material. Lengths are nanometres, costs minor units of `currency`, or bare counts without a price. */
export interface MaterialProblem {
  material: string;
  label: string;
  problem: StockProblem;
  currency: string | null;
  /** Marks of parts whose grain runs across their length: their problem's length is the part's width, and the reverse. */
  crosswise: string[];
}

export interface MaterialLayout extends MaterialProblem {
  layout: Layout;
}

/** Cubic nanometres in a board foot (144 cubic inches of 25.4 mm), and square and cubic nanometres in a metre's. */
const NM3_PER_BOARD_FOOT = 144 * 25_400_000 ** 3;
const NM_PER_M = 1e9;

function costOf(
  price: WrittenPrice | undefined,
  minor: number | undefined,
  size: { length: number; width: number; thickness: number },
): number {
  if (!price) return 1;
  const each = minor ?? price.minor;
  const { length, width, thickness } = size;
  switch (price.per) {
    case 'piece':
      return each;
    case 'board-foot':
      return Math.max(1, Math.round((each * length * width * thickness) / NM3_PER_BOARD_FOOT));
    case 'm3':
      return Math.max(
        1,
        Math.round(each * (length / NM_PER_M) * (width / NM_PER_M) * (thickness / NM_PER_M)),
      );
    case 'm2':
      return Math.max(1, Math.round(each * (length / NM_PER_M) * (width / NM_PER_M)));
    case 'm':
      return Math.max(1, Math.round(each * (length / NM_PER_M)));
  }
}

function sizesOf(material: ResolvedMaterial): number[][] {
  if (material.sizes.length > 0) return material.sizes;
  if (material.length === undefined) return [];
  return [material.width === undefined ? [material.length] : [material.length, material.width]];
}

/** Stock sizes are told apart by cost without a price, too: a larger one counts for more, the smallest for 1. */
function relativeCost(size: readonly number[], all: readonly (readonly number[])[]): number {
  const measure = (s: readonly number[]) => (s[0] ?? 0) * (s[1] ?? 1);
  const smallest = Math.min(...all.map(measure));
  return all.length === 1 ? 1 : Math.round((100 * measure(size)) / smallest);
}

function boughtStock(
  material: ResolvedMaterial,
  minor: number | undefined,
): { id: string; size: number[]; cost: number }[] {
  const sizes = sizesOf(material);
  return sizes.map((size, index) => ({
    id: `${material.name} ${index + 1}`,
    size,
    cost: material.price
      ? costOf(material.price, minor, {
          length: size[0] ?? 0,
          width: size[1] ?? 0,
          thickness: material.nominal,
        })
      : relativeCost(size, sizes),
  }));
}

function isCuttable(part: ResolvedPart): boolean {
  return part.qty > 0 && part.length >= 1 && part.width >= 1;
}

function sheetParts(
  material: ResolvedMaterial,
  parts: readonly ResolvedPart[],
): { parts: SheetPart[]; crosswise: string[] } {
  const crosswise: string[] = [];
  const list = parts.map((part): SheetPart => {
    const length = Math.round(part.length);
    const width = Math.round(part.width);
    const isFree = material.grain === 'none' || part.grain === 'none';
    // Stock and part agree when the grain runs along both or across both.
    const isCrosswise = !isFree && part.grain !== material.grain;
    if (isCrosswise) crosswise.push(part.mark);
    return {
      id: part.mark,
      length: isCrosswise ? width : length,
      width: isCrosswise ? length : width,
      qty: part.qty,
      turn: isFree && material.kind === 'sheet',
    };
  });
  return { parts: list, crosswise };
}

function sheetProblem(
  material: ResolvedMaterial,
  parts: readonly ResolvedPart[],
  settings: CuttingSettings,
): MaterialProblem {
  const { kerfNm, trimNm } = settings;
  const noTrim: Trim = { left: 0, right: 0, bottom: 0, top: 0 };
  const own = settings.stock.filter((s) => s.material === material.name && (s.widthNm ?? 0) > 0);
  const ownStock: SheetStock[] = own.flatMap((s, index) => {
    const id = `own ${index + 1}`;
    const width = s.widthNm ?? 0;
    if (!s.defects || s.defects.length === 0)
      return [{ id, length: s.lengthNm, width, count: s.count, cost: 0, trim: noTrim }];
    // A board is crosscut at its defects first; what lies between them is stock of its own.
    const bar: BarStock = { id, length: s.lengthNm, count: 1, cost: 0, defects: s.defects };
    const clear = clearStretches(
      { kind: 'bar', kerf: kerfNm, trim: { left: 0, right: 0 }, stock: [bar], parts: [] },
      bar,
    );
    return clear.map(({ from, to }, q) => ({
      id: `${id}.${q + 1}`,
      length: to - from,
      width,
      count: s.count,
      cost: 0,
      trim: noTrim,
    }));
  });
  const bought = boughtStock(material, settings.prices?.[material.name])
    .filter(({ size }) => (size[0] ?? 0) > 0 && (size[1] ?? 0) > 0)
    .map(({ id, size, cost }) => ({ id, length: size[0] ?? 0, width: size[1] ?? 0, count: null, cost }));
  const { parts: list, crosswise } = sheetParts(material, parts);
  return {
    material: material.name,
    label: material.label,
    currency: material.price?.currency ?? null,
    crosswise,
    problem: {
      kind: 'sheet',
      kerf: kerfNm,
      trim: { left: trimNm, right: trimNm, bottom: trimNm, top: trimNm },
      stock: [...ownStock, ...bought],
      parts: list,
      ripFirst: material.kind === 'board' || (settings.isRipFirst ?? false),
    },
  };
}

function barProblem(
  material: ResolvedMaterial,
  parts: readonly ResolvedPart[],
  settings: CuttingSettings,
): MaterialProblem {
  const own = settings.stock.filter((s) => s.material === material.name);
  const ownStock: BarStock[] = own.map((s, index) => ({
    id: `own ${index + 1}`,
    length: s.lengthNm,
    count: s.count,
    cost: 0,
    trim: { left: 0, right: 0 },
    defects: s.defects ?? [],
  }));
  const bought = boughtStock(material, settings.prices?.[material.name])
    .filter(({ size }) => (size[0] ?? 0) > 0)
    .map(({ id, size, cost }) => ({ id, length: size[0] ?? 0, count: null, cost }));
  return {
    material: material.name,
    label: material.label,
    currency: material.price?.currency ?? null,
    crosswise: [],
    problem: {
      kind: 'bar',
      kerf: settings.kerfNm,
      trim: { left: settings.trimNm, right: settings.trimNm },
      stock: [...ownStock, ...bought],
      parts: parts.map((part) => ({ id: part.mark, length: Math.round(part.length), qty: part.qty })),
    },
  };
}

/**
 * The cutting problems of a resolved plan, one for each material that parts are cut from, in the order of the plan. Impossible
 * parts (zero or negative sizes) are left out: the plan itself reports them. A material without any stock size gives
 * a problem without stock, whose parts are all refused.
 */
export function readPlanProblems(plan: ResolvedPlan, settings: CuttingSettings): MaterialProblem[] {
  return plan.materials.flatMap((material) => {
    const parts = plan.parts.filter((part) => part.material === material.name && isCuttable(part));
    if (parts.length === 0) return [];
    return [
      material.kind === 'bar'
        ? barProblem(material, parts, settings)
        : sheetProblem(material, parts, settings),
    ];
  });
}

/** Lays out every material of a resolved plan. `options` hold for each material by itself. */
export function layOutPlan(
  plan: ResolvedPlan,
  settings: CuttingSettings,
  options: LayOutOptions = {},
): MaterialLayout[] {
  return readPlanProblems(plan, settings).map((entry) => ({
    ...entry,
    layout: layOut(entry.problem, options),
  }));
}
