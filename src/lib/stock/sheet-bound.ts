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

/** Least cost of stock whose values add up to `wanted`: exact for one price, the relaxed problem rounded up for several. */
function coverCost(wanted: number, value: number[], cost: number[], count: number[]): number {
  let rest = wanted - TOLERANCE * Math.max(1, wanted);
  const order = value.map((_, s) => s).filter((s) => (value[s] as number) > 0);
  order.sort(
    (a, b) => (cost[a] as number) / (value[a] as number) - (cost[b] as number) / (value[b] as number),
  );
  const paid = cost.filter((c, s) => c > 0 && (count[s] as number) > 0);
  const step = paid.every(Number.isInteger) ? paid.reduce(greatestCommonDivisor, 0) : 0;
  let sum = 0;
  for (const s of order) {
    if (rest <= 0) break;
    const number = Math.min(count[s] as number, rest / (value[s] as number));
    sum += number * (cost[s] as number);
    rest -= number * (value[s] as number);
  }
  if (rest > 0) return Infinity;
  return step > 0 ? Math.ceil(sum / step - TOLERANCE) * step : sum;
}

/** The bound, in the unit of the stock's cost; Infinity when the limited stock cannot hold the parts. */
export function boundSheets(model: SheetModel): number {
  const { partX, partY, canTurn, stockX, stockY, kindOf } = model;
  if (model.units === 0) return 0;
  const quantity = new Float64Array(partX.length);
  for (const kind of kindOf) quantity[kind] = (quantity[kind] as number) + 1;
  const kinds = [...quantity.keys()].filter((kind) => (quantity[kind] as number) > 0);
  const stock = [...stockX.keys()];
  const capacityX = Math.max(...stockX);
  const capacityY = Math.max(...stockY);
  const cost = [...model.cost];
  const count = [...model.count];
  // The parts that no piece of the buyer's own can hold must come from bought stock.
  const onlyPaid = new Set(
    kinds.filter((kind) => !stock.some((s) => (cost[s] as number) === 0 && fitsStock(model, kind, s))),
  );
  const paidCount = count.map((n, s) => ((cost[s] as number) > 0 ? n : 0));

  const sizesX = kinds.flatMap((kind) =>
    (canTurn[kind] as number) ? [partX[kind] as number, partY[kind] as number] : [partX[kind] as number],
  );
  const sizesY = kinds.flatMap((kind) =>
    (canTurn[kind] as number) ? [partX[kind] as number, partY[kind] as number] : [partY[kind] as number],
  );
  const tabulate = (f: Transform, capacity: number) => ({
    straight: kinds.map((kind) =>
      (partX[kind] as number) <= capacity ? f(partX[kind] as number) : Infinity,
    ),
    turned: kinds.map((kind) => ((partY[kind] as number) <= capacity ? f(partY[kind] as number) : Infinity)),
    f,
  });
  const alongX = transformsFor(capacityX, sizesX).map((f) => tabulate(f, capacityX));
  const alongY = transformsFor(capacityY, sizesY).map((f) => tabulate(f, capacityY));

  let best = 0;
  for (const fx of alongX) {
    for (const fy of alongY) {
      let all = 0;
      let paid = 0;
      for (let q = 0; q < kinds.length; q++) {
        const kind = kinds[q] as number;
        // One way is impossible where it exceeds every stock: Infinity times zero is no value.
        const straightX = fx.straight[q] as number;
        const straightY = fy.turned[q] as number;
        let value = straightX === Infinity || straightY === Infinity ? Infinity : straightX * straightY;
        if (canTurn[kind] as number) {
          const turnedX = fx.turned[q] as number;
          const turnedY = fy.straight[q] as number;
          if (turnedX !== Infinity && turnedY !== Infinity) value = Math.min(value, turnedX * turnedY);
        }
        all += value * (quantity[kind] as number);
        if (onlyPaid.has(kind)) paid += value * (quantity[kind] as number);
      }
      const values = stock.map((s) => fx.f(stockX[s] as number) * fy.f(stockY[s] as number));
      const bound = Math.max(
        coverCost(all, values, cost, count),
        onlyPaid.size > 0 ? coverCost(paid, values, cost, paidCount) : 0,
      );
      if (bound > best) best = bound;
    }
  }
  return best;
}
