import type { SheetProblem, SheetStock, Trim, Unplaced } from './types.ts';

/**
 * A sheet problem as the search wants it: sizes with one kerf added, parts that cannot be cut left out, and the
 * single pieces ("units") to be cut numbered from 0. Arrays named by kind run over parts, by stock over stock sizes.
 */
export interface SheetModel {
  problem: SheetProblem;
  isRipFirst: boolean;
  units: number;
  /** Part of each unit. */
  kindOf: Int32Array;
  partX: Float64Array;
  partY: Float64Array;
  canTurn: Uint8Array;
  stockX: Float64Array;
  stockY: Float64Array;
  cost: Float64Array;
  /** Number of each stock; `units` where there is no limit, since more are never used. */
  count: Int32Array;
  refused: Unplaced[];
}

/** The trim of a stock size: its own, or else the problem's. */
export function trimOf(problem: SheetProblem, stock: SheetStock): Trim {
  return stock.trim ?? problem.trim;
}

/** Whether a part of this kind fits a stock size by itself. */
export function fitsStock(model: SheetModel, kind: number, stock: number): boolean {
  const x = model.partX[kind] as number;
  const y = model.partY[kind] as number;
  const w = model.stockX[stock] as number;
  const h = model.stockY[stock] as number;
  return (x <= w && y <= h) || ((model.canTurn[kind] as number) === 1 && y <= w && x <= h);
}

/** Builds the model. Parts larger than every stock size are refused by name. Throws on sizes that are not whole or not positive. */
export function buildSheetModel(problem: SheetProblem): SheetModel {
  const { kerf, parts, stock } = problem;
  const trims = [problem.trim, ...stock.flatMap((s) => (s.trim ? [s.trim] : []))];
  const lengths = [
    ...parts.flatMap((p) => [p.length, p.width]),
    ...stock.flatMap((s) => [s.length, s.width]),
  ];
  if (lengths.some((v) => !Number.isSafeInteger(v) || v <= 0))
    throw new Error('Sizes of parts and stock are whole and positive.');
  const bands = [kerf, ...trims.flatMap((t) => [t.left, t.right, t.bottom, t.top])];
  if (bands.some((v) => !Number.isSafeInteger(v) || v < 0))
    throw new Error('Kerf and trim are whole and not negative.');
  if (parts.some((p) => !Number.isSafeInteger(p.qty) || p.qty < 0))
    throw new Error('Quantities are whole and not negative.');
  if (stock.some((s) => !(s.cost >= 0))) throw new Error('The cost of stock is not negative.');

  const model: SheetModel = {
    problem,
    isRipFirst: problem.ripFirst ?? false,
    units: 0,
    kindOf: new Int32Array(0),
    partX: Float64Array.from(parts, (p) => p.length + kerf),
    partY: Float64Array.from(parts, (p) => p.width + kerf),
    canTurn: Uint8Array.from(parts, (p) => (p.turn && p.length !== p.width ? 1 : 0)),
    stockX: Float64Array.from(
      stock,
      (s) => s.length - trimOf(problem, s).left - trimOf(problem, s).right + kerf,
    ),
    stockY: Float64Array.from(
      stock,
      (s) => s.width - trimOf(problem, s).bottom - trimOf(problem, s).top + kerf,
    ),
    cost: Float64Array.from(stock, (s) => s.cost),
    count: new Int32Array(stock.length),
    refused: [],
  };
  const kindOf: number[] = [];
  parts.forEach((part, kind) => {
    if (part.qty === 0) return;
    if (stock.some((_, i) => fitsStock(model, kind, i))) {
      for (let c = 0; c < part.qty; c++) kindOf.push(kind);
    } else model.refused.push({ part: part.id, qty: part.qty, reason: 'PART_EXCEEDS_STOCK' });
  });
  model.units = kindOf.length;
  model.kindOf = Int32Array.from(kindOf);
  stock.forEach((s, i) => {
    model.count[i] = Math.min(s.count ?? Infinity, kindOf.length);
  });
  return model;
}
