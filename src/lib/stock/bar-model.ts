import type { BarPart, BarProblem, BarStock, Unplaced } from './types.ts';

/** A clear stretch of a bar, in real lengths from its untrimmed left end. */
export interface Stretch {
  from: number;
  to: number;
}

/**
 * A bar problem as the search wants it: kinds of part with one kerf added to each length, and bars as lists of clear
 * stretches of which each is one kerf longer than it really is. Parts that no stretch holds are left out.
 */
export interface BarModel {
  problem: BarProblem;
  /** Length of each kind, kerf included, longest first, and how many are wanted. */
  size: number[];
  wanted: number[];
  /** Index of each kind's part in the problem. */
  partOf: number[];
  /** By stock: clear stretches, their lengths with the kerf, price and number (capped at the number of parts). */
  stretches: Stretch[][];
  room: number[][];
  cost: number[];
  count: number[];
  isLimited: boolean[];
  refused: Unplaced[];
}

/** The stretches between trim and defects from which parts can be cut. */
export function clearStretches(problem: BarProblem, stock: BarStock): Stretch[] {
  const trim = stock.trim ?? problem.trim;
  const end = stock.length - trim.right;
  const found: Stretch[] = [];
  let from = trim.left;
  for (const defect of [...(stock.defects ?? [])].sort((a, b) => a.from - b.from)) {
    const to = Math.min(defect.from, end);
    if (to > from) found.push({ from, to });
    // The blade that parts the stretch before it may be wider than the defect.
    from = Math.max(from, defect.to, to > from ? to + problem.kerf : 0);
  }
  if (end > from) found.push({ from, to: end });
  return found;
}

/** Builds the model. Throws on lengths that are not whole or not positive. */
export function buildBarModel(problem: BarProblem): BarModel {
  const { kerf, parts, stock } = problem;
  const isWhole = (v: number) => Number.isSafeInteger(v) && v >= 0;
  if ([...parts, ...stock].some((p) => !isWhole(p.length) || p.length === 0)) {
    throw new Error('Lengths of parts and stock are whole and positive.');
  }
  const trims = [problem.trim, ...stock.flatMap((s) => (s.trim ? [s.trim] : []))];
  const bands = [
    kerf,
    ...trims.flatMap((t) => [t.left, t.right]),
    ...stock.flatMap((s) => (s.defects ?? []).flatMap((d) => [d.from, d.to])),
  ];
  if (!bands.every(isWhole)) throw new Error('Kerf, trim and defects are whole and not negative.');
  if (!parts.every((p) => isWhole(p.qty))) throw new Error('Quantities are whole and not negative.');
  if (stock.some((s) => !(s.cost >= 0))) throw new Error('The cost of stock is not negative.');

  const stretches = stock.map((s) => clearStretches(problem, s));
  const longest = Math.max(0, ...stretches.flat().map((s) => s.to - s.from));
  const refused: Unplaced[] = [];
  const kinds: number[] = [];
  parts.forEach((part, index) => {
    if (part.qty === 0) return;
    if (part.length > longest) refused.push({ part: part.id, qty: part.qty, reason: 'PART_EXCEEDS_STOCK' });
    else kinds.push(index);
  });
  kinds.sort((a, b) => (parts[b] as BarPart).length - (parts[a] as BarPart).length || a - b);
  const total = kinds.reduce((sum, index) => sum + (parts[index] as BarPart).qty, 0);
  return {
    problem,
    size: kinds.map((index) => (parts[index] as BarPart).length + kerf),
    wanted: kinds.map((index) => (parts[index] as BarPart).qty),
    partOf: kinds,
    stretches,
    room: stretches.map((list) => list.map((s) => s.to - s.from + kerf)),
    cost: stock.map((s) => s.cost),
    count: stock.map((s) => Math.min(s.count ?? Infinity, total)),
    isLimited: stock.map((s) => s.count !== null),
    refused,
  };
}
