import { GONE, type CutTree, copyTree, createTree, insertLeaf, pruneTree, refreshTree } from './cut-tree.ts';
import { rateGap } from './rate-gap.ts';
import { type SheetModel, fitsStock } from './sheet-model.ts';

/** A layout in the making: the patterns cut so far and the units that have no place, with one level of undo. */
export interface SheetState {
  trees: CutTree[];
  /** Units without a place. */
  out: number[];
  /** Cost of the stock in `trees`. */
  cost: number;
  /** Stock bought may not cost more than this. */
  limit: number;
  /** Takes each unit of `out` in its order and puts it in the best place, opening stock while the limit permits. */
  recreate: (blink: number) => void;
  /** Takes a node of a tree, with all below it, out of the layout. */
  remove: (tree: number, node: number) => void;
  /** Takes everything off a tree. */
  clear: (tree: number) => void;
  /** Starts a change that may be undone. */
  begin: () => void;
  keep: () => void;
  undo: () => void;
  /** Sends a piece of stock back with its parts out. Not undone. */
  drop: (tree: number) => void;
  /** Replaces everything by copies of these trees; the free stock that they do not use is laid ready. Not undone. */
  load: (from: readonly CutTree[]) => void;
  /** Nothing placed, every unit out. Not undone. */
  reset: () => void;
}

/** Creates an empty state for a model. `random` drives blinks and the choice of stock. */
export function createSheetState(model: SheetModel, random: () => number): SheetState {
  const { partX, partY, canTurn, stockX, stockY, cost: price, count, kindOf, isRipFirst } = model;
  let largest = 0;
  for (let s = 0; s < stockX.length; s++)
    largest = Math.max(largest, (stockX[s] as number) * (stockY[s] as number));
  const scale = 1 / largest;
  const spare: CutTree[] = [];
  const used = new Int32Array(stockX.length);
  // A kind that found no place in a pass finds none later in that pass: there is only less room.
  const failedIn = new Int32Array(partX.length);
  let pass = 0;

  let stamp = 0;
  let stampOf = new Int32Array(256);
  let changedAt: number[] = [];
  let changedFrom: CutTree[] = [];
  let opened = 0;
  let outBefore: number[] = [];

  let bestTree = -1;
  let bestGap = 0;
  let bestTurn = 0;
  let bestLoss = 0;

  const takeSpare = () => spare.pop() ?? createTree(32);

  const state: SheetState = {
    trees: [],
    out: [],
    cost: 0,
    limit: Infinity,
    recreate,
    remove,
    clear,
    begin,
    keep,
    undo,
    drop,
    load,
    reset,
  };

  function stampTree(tree: number): void {
    if (tree >= stampOf.length) {
      const larger = new Int32Array(2 * tree);
      larger.set(stampOf);
      stampOf = larger;
    }
    stampOf[tree] = stamp;
  }

  /** The tree, ready to be changed: the first change within a step puts the old one aside. */
  function touch(tree: number): CutTree {
    if (tree < stampOf.length && (stampOf[tree] as number) === stamp) return state.trees[tree] as CutTree;
    stampTree(tree);
    const old = state.trees[tree] as CutTree;
    const fresh = takeSpare();
    copyTree(old, fresh);
    state.trees[tree] = fresh;
    changedAt.push(tree);
    changedFrom.push(old);
    return fresh;
  }

  function open(stock: number): number {
    const tree = takeSpare();
    tree.stock = stock;
    tree.width = stockX[stock] as number;
    tree.height = stockY[stock] as number;
    tree.size = 0;
    refreshTree(tree, isRipFirst, scale);
    state.trees.push(tree);
    used[stock] = (used[stock] as number) + 1;
    state.cost += price[stock] as number;
    return state.trees.length - 1;
  }

  function discard(tree: CutTree): void {
    used[tree.stock] = (used[tree.stock] as number) - 1;
    state.cost -= price[tree.stock] as number;
    spare.push(tree);
  }

  /** Looks for the best gap for a kind in trees from `from` on; each place is overlooked with probability `blink`. */
  function search(kind: number, blink: number, from: number): boolean {
    bestTree = -1;
    bestLoss = Infinity;
    const length = partX[kind] as number;
    const width = partY[kind] as number;
    const area = length * width;
    for (let b = from; b < state.trees.length; b++) {
      const tree = state.trees[b] as CutTree;
      if (tree.free < area) continue;
      const { gapX, gapY, gaps } = tree;
      for (let turned = 0; turned <= (canTurn[kind] as number); turned++) {
        const x = turned ? width : length;
        const y = turned ? length : width;
        for (let i = 0; i < gaps; i++) {
          if ((gapX[i] as number) < x || (gapY[i] as number) < y) continue;
          if (blink > 0 && random() < blink) continue;
          const loss = rateGap(tree, i, x, y, isRipFirst, scale);
          if (loss < bestLoss) {
            bestLoss = loss;
            bestTree = b;
            bestGap = i;
            bestTurn = turned;
          }
        }
      }
    }
    return bestTree >= 0;
  }

  function put(unit: number): void {
    const tree = touch(bestTree);
    const kind = kindOf[unit] as number;
    const x = bestTurn ? (partY[kind] as number) : (partX[kind] as number);
    const y = bestTurn ? (partX[kind] as number) : (partY[kind] as number);
    insertLeaf(tree, bestGap, unit * 2 + bestTurn, x, y, isRipFirst);
    refreshTree(tree, isRipFirst, scale);
  }

  /** Opens a stock size at random among those that fit the kind and the limit. */
  function buy(kind: number): boolean {
    let chosen = -1;
    let seen = 0;
    for (let s = 0; s < stockX.length; s++) {
      if (
        (used[s] as number) >= (count[s] as number) ||
        state.cost + (price[s] as number) > state.limit ||
        !fitsStock(model, kind, s)
      )
        continue;
      seen++;
      if (random() * seen < 1) chosen = s;
    }
    if (chosen < 0) return false;
    const tree = open(chosen);
    stampTree(tree);
    opened++;
    return search(kind, 0, tree);
  }

  function recreate(blink: number): void {
    pass++;
    const still: number[] = [];
    for (const unit of state.out) {
      const kind = kindOf[unit] as number;
      if ((failedIn[kind] as number) === pass) still.push(unit);
      else if (search(kind, blink, 0) || buy(kind)) put(unit);
      else {
        failedIn[kind] = pass;
        still.push(unit);
      }
    }
    state.out = still;
  }

  function remove(tree: number, node: number): void {
    const t = touch(tree);
    const { code, parent } = t;
    // Everything after a node that hangs below it comes before its next sibling.
    for (let i = node; i < t.size && (i === node || (parent[i] as number) >= node); i++) {
      if ((code[i] as number) >= 0) state.out.push((code[i] as number) >> 1);
      code[i] = GONE;
    }
    pruneTree(t, isRipFirst);
    refreshTree(t, isRipFirst, scale);
  }

  function clear(tree: number): void {
    const t = touch(tree);
    for (let i = 0; i < t.size; i++)
      if ((t.code[i] as number) >= 0) state.out.push((t.code[i] as number) >> 1);
    t.size = 0;
    refreshTree(t, isRipFirst, scale);
  }

  function begin(): void {
    stamp++;
    changedAt = [];
    changedFrom = [];
    opened = 0;
    outBefore = state.out.slice();
  }

  function keep(): void {
    for (const tree of changedFrom) spare.push(tree);
    begin();
  }

  function undo(): void {
    for (; opened > 0; opened--) discard(state.trees.pop() as CutTree);
    for (let q = changedAt.length - 1; q >= 0; q--) {
      const at = changedAt[q] as number;
      spare.push(state.trees[at] as CutTree);
      state.trees[at] = changedFrom[q] as CutTree;
    }
    state.out = outBefore;
    begin();
  }

  function drop(tree: number): void {
    const t = state.trees[tree] as CutTree;
    for (let i = 0; i < t.size; i++)
      if ((t.code[i] as number) >= 0) state.out.push((t.code[i] as number) >> 1);
    const last = state.trees.pop() as CutTree;
    if (last !== t) state.trees[tree] = last;
    discard(t);
    begin();
  }

  function load(from: readonly CutTree[]): void {
    while (state.trees.length > 0) discard(state.trees.pop() as CutTree);
    state.cost = 0;
    state.out = [];
    for (const tree of from) {
      const copy = takeSpare();
      copyTree(tree, copy);
      state.trees.push(copy);
      used[copy.stock] = (used[copy.stock] as number) + 1;
      state.cost += price[copy.stock] as number;
    }
    // What the buyer has already is always at hand.
    for (let s = 0; s < stockX.length; s++) {
      if ((price[s] as number) === 0) while ((used[s] as number) < (count[s] as number)) open(s);
    }
    begin();
  }

  function reset(): void {
    load([]);
    state.out = Array.from({ length: model.units }, (_, unit) => unit);
    begin();
  }

  return state;
}
