import type { SheetModel } from './sheet-model.ts';

/** The orders in which parts are put in, as keys of which the largest comes first. */
const ORDERS: ((x: number, y: number) => number)[] = [
  (x, y) => x * y,
  (x, y) => Math.max(x, y) + Math.min(x, y) * 1e-3,
  (x, y) => x + y,
  (x, y) => x + y * 1e-3,
  (x, y) => y + x * 1e-3,
  (x, y) => Math.min(x, y),
];
/** Number of orders that depend on size alone: 0 up to but not this. */
export const SIZE_ORDERS = ORDERS.length;
/** By area times weight, and at random. */
const BY_WEIGHT = ORDERS.length;
const AT_RANDOM = ORDERS.length + 1;
/** Upper ends of the shares in which orders are drawn. */
const DRAWN: [number, number][] = [
  [0.4, 0],
  [0.6, 1],
  [0.75, 2],
  [0.85, BY_WEIGHT],
  [0.9, 5],
  [1, AT_RANDOM],
];

/** Sorts units for recreation. */
export interface UnitOrders {
  /** Sorts in place by one of the orders. */
  sort: (units: number[], order: number) => void;
  /** An order at random, the more useful ones more often. */
  draw: () => number;
}

/** Creates the orders of a model; `weight` by kind may change between sorts. */
export function createUnitOrders(model: SheetModel, weight: Float64Array, random: () => number): UnitOrders {
  const { partX, partY, kindOf } = model;
  const keys = ORDERS.map((order) => Float64Array.from(partX, (x, kind) => order(x, partY[kind] as number)));
  const area = keys[0] as Float64Array;
  const key = new Float64Array(model.units);

  function keyOf(unit: number, order: number): number {
    const kind = kindOf[unit] as number;
    if (order === AT_RANDOM) return random();
    if (order === BY_WEIGHT) return (area[kind] as number) * (weight[kind] as number);
    return keys[order]?.[kind] as number;
  }

  return {
    sort(units, order) {
      for (const unit of units) key[unit] = keyOf(unit, order);
      // The lists are short, so they are sorted by insertion.
      for (let a = 1; a < units.length; a++) {
        const unit = units[a] as number;
        let b = a - 1;
        while (b >= 0 && (key[units[b] as number] as number) < (key[unit] as number)) {
          units[b + 1] = units[b] as number;
          b--;
        }
        units[b + 1] = unit;
      }
    },
    draw() {
      const r = random();
      for (const [end, order] of DRAWN) if (r < end) return order;
      return AT_RANDOM;
    },
  };
}
