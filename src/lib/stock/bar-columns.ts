import type { BarModel } from './bar-model.ts';
import { fillLength } from './knapsack.ts';

/**
 * Column generation for bars (Gilmore and Gomory 1961, 1963): a linear program over cutting patterns, whose patterns are found
 * as they are needed by filling a bar with the parts that are worth most; its dual prices prove a lower bound, and diving
 * through it (fixing whole numbers of patterns, then solving for what remains) gives layouts that mostly meet the bound.
 */

/** How one bar is filled: by clear stretch, how many of each kind. */
export interface BarPattern {
  stock: number;
  take: number[][];
}

interface Column {
  pattern: BarPattern | null;
  cost: number;
  rows: number[];
  values: number[];
}

export interface RelaxedBars {
  /** Proved bound on the cost, not rounded. */
  bound: number;
  /** Patterns of the last basis and how many of each. */
  used: { pattern: BarPattern; times: number }[];
}

const EPSILON = 1e-9;
const MAX_PIVOTS = 3000;

/** Solves the relaxation for the given numbers of parts and bars. */
export function relaxBars(
  model: BarModel,
  wanted: readonly number[],
  count: readonly number[],
  shouldStop: () => boolean,
): RelaxedBars {
  const kinds = wanted.length;
  const limited = model.cost.map((_, t) => t).filter((t) => model.isLimited[t] as boolean);
  const rowOfStock = new Map(limited.map((t, q) => [t, kinds + q]));
  const rows = kinds + limited.length;
  const dearest = Math.max(1, ...model.cost);
  const penalty = dearest * 100;

  function toColumn(pattern: BarPattern): Column {
    const column: Column = { pattern, cost: model.cost[pattern.stock] as number, rows: [], values: [] };
    for (let i = 0; i < kinds; i++) {
      let n = 0;
      for (const take of pattern.take) n += take[i] as number;
      if (n > 0) {
        column.rows.push(i);
        column.values.push(n);
      }
    }
    const row = rowOfStock.get(pattern.stock);
    if (row !== undefined) {
      column.rows.push(row);
      column.values.push(1);
    }
    return column;
  }

  // Start: every part by a penalty, every limited bar unused.
  const basis: Column[] = [];
  const level = new Float64Array(rows);
  const inverse = new Float64Array(rows * rows);
  for (let r = 0; r < rows; r++) {
    basis.push({ pattern: null, cost: r < kinds ? penalty : 0, rows: [r], values: [1] });
    level[r] = r < kinds ? (wanted[r] as number) : (count[limited[r - kinds] as number] as number);
    inverse[r * rows + r] = 1;
  }
  const pool: Column[] = [];
  const price = new Float64Array(rows);

  function updatePrices(): void {
    price.fill(0);
    for (let r = 0; r < rows; r++) {
      const cost = (basis[r] as Column).cost;
      if (cost === 0) continue;
      for (let c = 0; c < rows; c++)
        price[c] = (price[c] as number) + cost * (inverse[r * rows + c] as number);
    }
  }

  function reducedCost(column: Column): number {
    let sum = column.cost;
    for (let q = 0; q < column.rows.length; q++)
      sum -= (price[column.rows[q] as number] as number) * (column.values[q] as number);
    return sum;
  }

  /** Brings a column into the basis; false when nothing limits it, which rounding alone can cause. */
  function pivot(column: Column): boolean {
    const direction = new Float64Array(rows);
    for (let q = 0; q < column.rows.length; q++) {
      const at = column.rows[q] as number;
      const by = column.values[q] as number;
      for (let r = 0; r < rows; r++)
        direction[r] = (direction[r] as number) + (inverse[r * rows + at] as number) * by;
    }
    let leaving = -1;
    let step = Infinity;
    for (let r = 0; r < rows; r++) {
      if ((direction[r] as number) <= EPSILON) continue;
      const ratio = (level[r] as number) / (direction[r] as number);
      if (
        ratio < step - EPSILON ||
        (ratio < step + EPSILON && leaving >= 0 && (direction[r] as number) > (direction[leaving] as number))
      ) {
        step = ratio;
        leaving = r;
      }
    }
    if (leaving < 0) return false;
    const by = direction[leaving] as number;
    for (let c = 0; c < rows; c++) inverse[leaving * rows + c] = (inverse[leaving * rows + c] as number) / by;
    for (let r = 0; r < rows; r++) {
      if (r === leaving || (direction[r] as number) === 0) continue;
      const factor = direction[r] as number;
      for (let c = 0; c < rows; c++)
        inverse[r * rows + c] =
          (inverse[r * rows + c] as number) - factor * (inverse[leaving * rows + c] as number);
      level[r] = Math.max(0, (level[r] as number) - factor * step);
    }
    level[leaving] = step;
    basis[leaving] = column;
    return true;
  }

  /** The best filling of each stretch of a bar at these prices of the parts, and an upper bound on its worth. */
  function fillBar(
    stock: number,
    worth: readonly number[],
  ): { pattern: BarPattern; value: number; bound: number } {
    let value = 0;
    let bound = 0;
    const take = (model.room[stock] as number[]).map((room) => {
      const filled = fillLength(room, model.size, worth, wanted);
      value += filled.value;
      bound += filled.bound;
      return filled.take;
    });
    return { pattern: { stock, take }, value, bound };
  }

  let bound = 0;
  /** A proved bound from any prices of the parts that are not negative, by weak duality. */
  function proveBound(worth: readonly number[], worthOfBar: readonly number[]): void {
    // Prices are scaled so that no unlimited bar is worth more than it costs; limited ones may be, and are charged for it.
    let scale = 1;
    model.cost.forEach((cost, t) => {
      if (!(model.isLimited[t] as boolean) && (worthOfBar[t] as number) > 0)
        scale = Math.min(scale, cost / (worthOfBar[t] as number));
    });
    let sum = 0;
    for (let i = 0; i < kinds; i++) sum += (wanted[i] as number) * (worth[i] as number) * scale;
    for (const t of limited)
      sum +=
        (count[t] as number) * Math.min(0, (model.cost[t] as number) - (worthOfBar[t] as number) * scale);
    if (sum > bound) bound = sum;
  }

  for (let pivots = 0; pivots < MAX_PIVOTS && !shouldStop(); pivots++) {
    updatePrices();
    let entering: Column | null = null;
    let least = -1e-7 * dearest;
    for (let r = 0; r < rows; r++) {
      // Surplus of a part, or a limited bar left unused.
      const reduced = r < kinds ? (price[r] as number) : -(price[r] as number);
      if (reduced < least) {
        least = reduced;
        entering = { pattern: null, cost: 0, rows: [r], values: [r < kinds ? -1 : 1] };
      }
    }
    if (!entering) {
      for (const column of pool) {
        const reduced = reducedCost(column);
        if (reduced < least) {
          least = reduced;
          entering = column;
        }
      }
    }
    if (!entering) {
      const worth = Array.from({ length: kinds }, (_, i) => Math.max(0, price[i] as number));
      const worthOfBar = model.cost.map((cost, t) => {
        if ((count[t] as number) === 0) return 0;
        const { pattern, value, bound: most } = fillBar(t, worth);
        const row = rowOfStock.get(t);
        const reduced = cost - value - (row === undefined ? 0 : (price[row] as number));
        if (reduced < -1e-7 * dearest) {
          const column = toColumn(pattern);
          pool.push(column);
          if (reduced < least) {
            least = reduced;
            entering = column;
          }
        }
        return most;
      });
      proveBound(worth, worthOfBar);
    }
    if (!entering || !pivot(entering)) break;
  }
  const used: RelaxedBars['used'] = [];
  basis.forEach((column, r) => {
    if (column.pattern && (level[r] as number) > EPSILON)
      used.push({ pattern: column.pattern, times: level[r] as number });
  });
  return { bound, used };
}

/** Rounds a bound on the cost up to what whole prices can add up to. */
export function roundUpCost(bound: number, cost: readonly number[]): number {
  const paid = cost.filter((c) => c > 0);
  if (paid.length === 0) return 0;
  if (!paid.every(Number.isInteger)) return bound - 1e-6;
  let step = 0;
  for (const c of paid) {
    let a = c;
    let b = step;
    while (b > 0) [a, b] = [b, a % b];
    step = a;
  }
  return Math.ceil(bound / step - 1e-6) * step;
}

/**
 * Dives: fixes whole numbers of the relaxation's patterns, or one of the patterns that are nearest to whole, until every part is
 * cut. Gives the bars so filled, which may leave parts out where limited stock runs short. `random` lets one dive differ from
 * the next: each pattern's fraction is blurred by up to `blur`.
 */
export function diveBars(
  model: BarModel,
  first: RelaxedBars,
  random: () => number,
  blur: number,
  shouldStop: () => boolean,
): BarPattern[] {
  const wanted = model.wanted.slice();
  const count = model.count.slice();
  const fixed: BarPattern[] = [];

  function fix(pattern: BarPattern, times: number): void {
    for (let k = 0; k < times && (count[pattern.stock] as number) > 0; k++) {
      const take = pattern.take.map((stretch) =>
        stretch.map((n, kind) => {
          const taken = Math.min(n, wanted[kind] as number);
          wanted[kind] = (wanted[kind] as number) - taken;
          return taken;
        }),
      );
      if (take.every((stretch) => stretch.every((n) => n === 0))) return;
      count[pattern.stock] = (count[pattern.stock] as number) - 1;
      fixed.push({ stock: pattern.stock, take });
    }
  }

  let relaxed = first;
  while (wanted.some((n) => n > 0) && !shouldStop()) {
    const before = fixed.length;
    for (const { pattern, times } of relaxed.used) fix(pattern, Math.floor(times + 1e-6));
    if (fixed.length === before) {
      const rated = relaxed.used.map(({ pattern, times }) => ({
        pattern,
        near: (times % 1) + blur * random(),
      }));
      const nearest = rated.sort((a, b) => b.near - a.near)[0] as { pattern: BarPattern; near: number };
      if (!nearest) break;
      fix(nearest.pattern, 1);
      if (fixed.length === before) break;
    }
    // Patterns made for more parts than remain would mislead: each remainder makes its own.
    if (wanted.some((n) => n > 0)) relaxed = relaxBars(model, wanted, count, shouldStop);
  }
  return fixed;
}
