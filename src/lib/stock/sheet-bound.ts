import type { SheetModel } from './sheet-model.ts';
import { fitsStock } from './sheet-model.ts';

/**
 * Lower bound on the cost of new stock, by dual-feasible functions: each maps sizes so that parts side by side never
 * add up to more than the stock they lie in, hence no packing holds more transformed area than the stock has
 * (Fekete and Schepers 2001; the two families f0 and f2 as in Carlier, Clautiaux and Moukrim 2007; both are superadditive,
 * so that a smaller stock size counts by its own transformed size). A part that may turn counts by the lesser of its two ways.
 */

/** How many thresholds of each family are tried along one direction. */
const MAX_THRESHOLDS = 24;
/** Room for rounding in sums of quotients. */
const TOLERANCE = 1e-9;

type Transform = (size: number) => number;

function cutOffSmall(capacity: number, k: number): Transform {
  return (x) => (x > capacity - k ? 1 : x < k ? 0 : x / capacity);
}

function roundToSteps(capacity: number, k: number): Transform {
  const steps = Math.floor(capacity / k);
  return (x) => {
    if (2 * x > capacity) return 1 - Math.floor((capacity - x) / k) / steps;
    if (2 * x === capacity) return 0.5;
    return Math.floor(x / k) / steps;
  };
}

/** Evenly spread choice of at most `most` members of a sorted list. */
function thin(values: number[], most: number): number[] {
  if (values.length <= most) return values;
  return Array.from({ length: most }, (_, i) => values[Math.floor((i * values.length) / most)] as number);
}

function transformsFor(capacity: number, sizes: number[]): Transform[] {
  const halves = sizes.flatMap((x) => (2 * x <= capacity ? [x] : [capacity - x, capacity - x + 1]));
  const cutOffs = [...new Set(halves.filter((k) => k > 0 && 2 * k <= capacity))].sort((a, b) => a - b);
  const steps = [
    ...new Set([
      ...sizes.filter((k) => 2 * k <= capacity),
      ...[2, 3, 4, 5].map((j) => Math.floor(capacity / (j + 1)) + 1),
    ]),
  ]
    .filter((k) => k > 0 && k <= capacity)
    .sort((a, b) => a - b);
  return [
    (x) => x / capacity,
    // Of parts larger than half, no two lie side by side.
    cutOffSmall(capacity, capacity / 2),
    ...thin(cutOffs, MAX_THRESHOLDS).map((k) => cutOffSmall(capacity, k)),
    ...thin(steps, MAX_THRESHOLDS).map((k) => roundToSteps(capacity, k)),
  ];
}

function greatestCommonDivisor(a: number, b: number): number {
  while (b > 0) [a, b] = [b, a % b];
  return a;
}

/** What whole prices add up to in multiples of: their greatest common divisor, or 0 where they are not whole. */
function stepOf(cost: readonly number[]): number {
  const paid = cost.filter((c) => c > 0);
  return paid.every(Number.isInteger) ? paid.reduce(greatestCommonDivisor, 0) : 0;
}

/** Least cost of stock whose values add up to `wanted`, parts of a piece allowed: the best value for its price comes first. */
function coverCost(
  wanted: number,
  value: Float64Array,
  cost: readonly number[],
  count: readonly number[],
): number {
  let rest = wanted - TOLERANCE * Math.max(1, wanted);
  let sum = 0;
  let before = -1;
  let taken = -1;
  while (rest > 0) {
    let next = -1;
    let least = Infinity;
    for (let s = 0; s < value.length; s++) {
      if (!((value[s] as number) > 0)) continue;
      const rate = (cost[s] as number) / (value[s] as number);
      if (rate < least && (rate > before || (rate === before && s > taken))) {
        least = rate;
        next = s;
      }
    }
    if (next < 0) return Infinity;
    before = least;
    taken = next;
    const enough = rest / (value[next] as number);
    const number = Math.min(count[next] as number, enough);
    sum += number * (cost[next] as number);
    rest = number === enough ? 0 : rest - number * (value[next] as number);
  }
  return sum;
}

/** One transform along one direction, tabulated: parts as they lie, parts turned, and stock. */
interface Table {
  straight: Float64Array;
  turned: Float64Array;
  ofStock: Float64Array;
}

/** The bound, in the unit of the stock's cost; Infinity when the limited stock cannot hold the parts. */
export function boundSheets(model: SheetModel): number {
  const { partX, partY, stockX, stockY } = model;
  if (model.units === 0) return 0;
  const wantedOf = new Float64Array(partX.length);
  for (const kind of model.kindOf) wantedOf[kind] = (wantedOf[kind] as number) + 1;
  const kinds = [...wantedOf.keys()].filter((kind) => (wantedOf[kind] as number) > 0);
  const wanted = Float64Array.from(kinds, (kind) => wantedOf[kind] as number);
  const x = Float64Array.from(kinds, (kind) => partX[kind] as number);
  const y = Float64Array.from(kinds, (kind) => partY[kind] as number);
  const canTurn = Uint8Array.from(kinds, (kind) => model.canTurn[kind] as number);
  const cost = [...model.cost];
  const count = [...model.count];
  const step = stepOf(cost);
  // The parts that no piece of the buyer's own can hold must come from bought stock.
  const isOnlyPaid = Uint8Array.from(kinds, (kind) =>
    cost.some((c, s) => c === 0 && fitsStock(model, kind, s)) ? 0 : 1,
  );
  const hasOwn = cost.some((c) => c === 0);
  const paidCount = count.map((n, s) => ((cost[s] as number) > 0 ? n : 0));

  const turnedOf = (sizes: Float64Array) => [...sizes].filter((_, q) => canTurn[q] === 1);
  function tabulate(along: Float64Array, across: Float64Array, stock: Float64Array): Table[] {
    const capacity = Math.max(...stock);
    // A way to lie that exceeds every stock is worth infinitely much, so that the other one counts.
    const tabulateSizes = (sizes: Float64Array, f: Transform) =>
      sizes.map((size) => (size <= capacity ? f(size) : Infinity));
    return transformsFor(capacity, [...along, ...turnedOf(across)]).map((f) => ({
      straight: tabulateSizes(along, f),
      turned: tabulateSizes(across, f),
      ofStock: stock.map(f),
    }));
  }
  const alongX = tabulate(x, y, stockX);
  const alongY = tabulate(y, x, stockY);
  const values = new Float64Array(stockX.length);

  function valueOf(fx: Float64Array, fy: Float64Array, q: number): number {
    const a = fx[q] as number;
    const b = fy[q] as number;
    return a === Infinity || b === Infinity ? Infinity : a * b;
  }

  let best = 0;
  for (const fx of alongX) {
    for (const fy of alongY) {
      let all = 0;
      let paid = 0;
      for (let q = 0; q < kinds.length; q++) {
        let value = valueOf(fx.straight, fy.straight, q);
        if (canTurn[q]) value = Math.min(value, valueOf(fx.turned, fy.turned, q));
        value *= wanted[q] as number;
        all += value;
        if (isOnlyPaid[q]) paid += value;
      }
      for (let s = 0; s < values.length; s++)
        values[s] = (fx.ofStock[s] as number) * (fy.ofStock[s] as number);
      best = Math.max(best, coverCost(all, values, cost, count));
      if (hasOwn && paid > 0) best = Math.max(best, coverCost(paid, values, cost, paidCount));
    }
  }
  return step > 0 && best > 0 ? Math.ceil(best / step - TOLERANCE) * step : best;
}
