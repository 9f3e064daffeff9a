import { type CutTree, copyTree, createTree } from './cut-tree.ts';
import { createLateAcceptance } from './late-acceptance.ts';
import { createRandom } from './random.ts';
import type { SheetModel } from './sheet-model.ts';
import { type SheetState, createSheetState } from './sheet-state.ts';
import { SIZE_ORDERS, createUnitOrders } from './unit-orders.ts';

/**
 * Goal-driven ruin and recreate on cut trees with late acceptance, after Gardeyn and Wauters (arXiv 2508.19306): the limit on
 * the cost of stock is set just below the best layout known, so that some parts find no place; patterns are taken
 * apart a little and put together again until all do. Elastic rows, the choice of gaps and the orders are our own.
 */

/** Settings found by measuring on the instances of the bench. */
const HISTORY = 500;
const BLINK = 0.02;
const MOST_TREES = 2;
const MOST_NODES = 6;
const WHOLE_TREE = 0.05;
const WHOLE_ROW = 0.25;
/** Shares of steps that keep a row together, join parts that share a side, rate gaps by close fit, or clear whole trees first. */
const HELD_ROW = 0.5;
const JOINED = 0.3;
const CLOSE_FIT = 0.3;
const CLEARED = 0.05;
/** Weight of scattered leftovers against the area of parts without a place. */
const SCATTER = 0.005;
/** Every so many steps the parts then without a place gain so much weight, until the search finds room for the awkward ones. */
const LEARN_EVERY = 16;
const LEARN = 0.01;
/** Weight of all squared leftovers against the largest one, when leftovers are gathered. */
const TOGETHER = 0.6;
/** And of a row of pieces, since it takes a fence setting of its own. */
const ROW = 2e-5;
/** Steps between two looks at the caller's clock. */
const STEPS_PER_LOOK = 16;
/** Of every ten slices of search one goes into gathering the leftovers of the best layout. */
const SLICE = 1000;
const GATHER_EVERY = 10;
/** Steps without a better gathering after which a layout of proved cost is done. */
const GATHER_PATIENCE = 6000;

/** A layout found: copies of its trees, and the units it has no place for. */
export interface FoundSheets {
  trees: CutTree[];
  out: number[];
  cost: number;
  steps: number;
}

export interface SheetSearchOptions {
  seed: number;
  steps: number;
  /** Asked for once, after the first answer, since it takes as long as that. */
  proveBound: () => number;
  shouldStop: () => boolean;
  /** Called with each layout that places more, or costs less. */
  onFound: (found: FoundSheets) => void;
  /** Called with layouts of the least cost found whose leftovers lie closer together. */
  onGathered: (found: FoundSheets) => void;
}

/** Searches until the steps are spent or the caller says stop; an empty layout is found at once where there is nothing to cut. */
export function searchSheets(model: SheetModel, options: SheetSearchOptions): void {
  const random = createRandom(options.seed);
  const { partX, partY, kindOf, cost: price } = model;
  let largest = 0;
  for (let s = 0; s < price.length; s++)
    largest = Math.max(largest, (model.stockX[s] as number) * (model.stockY[s] as number));
  const area = Float64Array.from(partX, (x, kind) => (x * (partY[kind] as number)) / largest);
  const weight = new Float64Array(partX.length).fill(1);
  const orders = createUnitOrders(model, weight, random);

  function areaOut(units: number[]): number {
    let sum = 0;
    for (const unit of units) sum += area[kindOf[unit] as number] as number;
    return sum;
  }

  function leftoverOf(state: SheetState): number {
    let sum = 0;
    for (const tree of state.trees) sum += tree.leftover;
    return sum;
  }

  /** Takes a few nodes out of one or two trees. */
  function ruin(state: SheetState): void {
    if (state.trees.length === 0) return;
    const trees = 1 + Math.floor(random() * MOST_TREES);
    let left = 1 + Math.floor(random() * MOST_NODES);
    for (let r = 0; r < trees && left > 0; r++) {
      const b = Math.floor(random() * state.trees.length);
      const share = r === trees - 1 ? left : 1 + Math.floor(random() * left);
      left -= share;
      if (random() < WHOLE_TREE) {
        state.clear(b);
        continue;
      }
      for (let s = 0; s < share; s++) {
        const tree = state.trees[b] as CutTree;
        if (tree.size === 0) break;
        let node = Math.floor(random() * tree.size);
        // Mostly a single part, now and then a whole row, never all.
        if (random() > WHOLE_ROW || node === 0) {
          for (let tries = 0; (tree.code[node] as number) < 0 && tries < 5; tries++)
            node = Math.floor(random() * tree.size);
        }
        if (node === 0) node = tree.size - 1;
        const isRow = ((state.trees[b] as CutTree).code[node] as number) < 0;
        state.remove(b, node, isRow && random() < HELD_ROW);
      }
    }
  }

  /** One step: ruin and recreate. */
  function change(state: SheetState): void {
    ruin(state);
    if (random() < CLEARED) {
      for (let k = Math.floor(random() * 2); k >= 0 && state.trees.length > 0; k--) {
        state.clear(Math.floor(random() * state.trees.length));
      }
    }
    if (random() < JOINED) state.joinOut();
    state.isCloseFit = random() < CLOSE_FIT;
    orders.sort(state.out, orders.draw());
    state.recreate(BLINK);
  }

  let steps = 0;
  let isStopped = false;
  function mayGoOn(): boolean {
    if (isStopped || steps >= options.steps) return false;
    if (steps % STEPS_PER_LOOK === 0 && options.shouldStop()) isStopped = true;
    return !isStopped;
  }

  let bestTrees: CutTree[] = [];
  let bestCost = Infinity;
  let bestOut = Infinity;
  function snapshot(state: SheetState): FoundSheets {
    const trees = state.trees
      .filter((tree) => tree.size > 0)
      .map((tree) => {
        const copy = createTree(tree.size + 4);
        copyTree(tree, copy);
        return copy;
      });
    return {
      trees,
      out: state.out.slice(),
      cost: trees.reduce((sum, tree) => sum + (price[tree.stock] as number), 0),
      steps,
    };
  }
  /** Keeps and reports the state when it places more than the best, or costs less. */
  function offer(state: SheetState): boolean {
    const out = areaOut(state.out);
    if (out > bestOut) return false;
    const found = snapshot(state);
    if (out === bestOut && found.cost >= bestCost) return false;
    bestOut = out;
    bestCost = found.cost;
    bestTrees = found.trees;
    options.onFound(found);
    return true;
  }

  // First answers: everything at once, in each order.
  const state = createSheetState(model, random);
  let lowerBound = 0;
  for (let order = 0; order < SIZE_ORDERS; order++) {
    if (order > 0 && (bestCost <= lowerBound || !mayGoOn())) break;
    state.reset();
    orders.sort(state.out, order);
    state.recreate(0);
    offer(state);
    if (order === 0) lowerBound = options.proveBound();
    else steps++;
  }

  const reducing = createLateAcceptance(HISTORY);
  function measureReduced(): number {
    let sum = -SCATTER * leftoverOf(state);
    for (const unit of state.out) {
      const kind = kindOf[unit] as number;
      sum += (area[kind] as number) * (weight[kind] as number);
    }
    return sum;
  }
  /** Makes the parts that are out now count for more. */
  function learn(): void {
    for (const unit of state.out) {
      const kind = kindOf[unit] as number;
      weight[kind] = (weight[kind] as number) + LEARN;
    }
    reducing.renew(measureReduced());
  }

  /** Sets the goal below the best cost, and gives stock back until it is kept. */
  function aimLower(): void {
    state.load(bestTrees);
    if (bestOut > 0) {
      // Not all parts fit: any stock may be used for a better choice of them.
      state.out = unplaced(bestTrees);
      state.limit = Infinity;
    } else {
      const paid = price.filter((p) => p > 0);
      state.limit = bestCost - (paid.every(Number.isInteger) ? 1 : bestCost * 1e-9);
      while (state.cost > state.limit) {
        let emptiest = -1;
        let least = Infinity;
        state.trees.forEach((tree, b) => {
          const filled = (tree.width * tree.height - tree.free) * (0.8 + 0.4 * random());
          if ((price[tree.stock] as number) > 0 && filled < least) {
            least = filled;
            emptiest = b;
          }
        });
        state.drop(emptiest);
      }
    }
    state.begin();
    weight.fill(1);
    reducing.start(measureReduced());
  }

  function unplaced(trees: readonly CutTree[]): number[] {
    const placed = new Set<number>();
    for (const tree of trees)
      for (let i = 0; i < tree.size; i++)
        if ((tree.code[i] as number) >= 0) placed.add((tree.code[i] as number) >> 1);
    return Array.from({ length: model.units }, (_, unit) => unit).filter((unit) => !placed.has(unit));
  }

  function reduce(until: number): void {
    while (steps < until && mayGoOn()) {
      steps++;
      change(state);
      if ((bestOut > 0 || state.out.length === 0) && offer(state)) {
        if (bestOut === 0 && bestCost <= lowerBound) return;
        aimLower();
      } else if (reducing.accepts(measureReduced())) state.keep();
      else state.undo();
      if (steps % LEARN_EVERY === 0) learn();
    }
  }

  // A second state keeps the best cost and gathers what is left over into few large pieces.
  const tidy = createSheetState(model, random);
  const gathering = createLateAcceptance(HISTORY);
  let gatheredFrom: CutTree[] | null = null;
  let gathered = 0;
  let gatheredAt = 0;
  /** The largest piece left over, something for leftovers that lie together elsewhere, and a little less for every row. */
  function measureGathered(): number {
    let largest = 0;
    let nodes = 0;
    for (const tree of tidy.trees) {
      nodes += tree.size;
      if (tree.size > 0 && tree.largest > largest) largest = tree.largest;
    }
    return largest + TOGETHER * leftoverOf(tidy) - ROW * nodes;
  }
  function gather(until: number): void {
    if (gatheredFrom !== bestTrees) {
      tidy.load(bestTrees);
      tidy.limit = bestCost;
      gathered = measureGathered();
      gathering.start(-gathered);
      gatheredFrom = bestTrees;
      gatheredAt = steps;
    }
    while (steps < until && mayGoOn()) {
      steps++;
      change(tidy);
      const value = tidy.out.length === 0 ? measureGathered() : -Infinity;
      if (value === -Infinity || !gathering.accepts(-value)) {
        tidy.undo();
        continue;
      }
      tidy.keep();
      if (value > gathered) {
        gathered = value;
        gatheredAt = steps;
        options.onGathered(snapshot(tidy));
      }
    }
  }

  const isLeast = () => bestOut === 0 && bestCost <= lowerBound;
  if (model.units === 0 || !mayGoOn()) return;
  if (!isLeast()) aimLower();
  for (let slice = 1; mayGoOn(); slice++) {
    if (isLeast() && gatheredFrom === bestTrees && steps - gatheredAt > GATHER_PATIENCE) return;
    if (bestOut === 0 && (isLeast() || slice % GATHER_EVERY === 0)) gather(steps + SLICE);
    else reduce(steps + SLICE);
  }
}
