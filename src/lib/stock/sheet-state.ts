import {
  type CutBlock,
  copyBlock,
  countLevels,
  createBlock,
  crossOf,
  insertBlock,
  keepsStages,
  turnBlock,
} from './cut-block.ts';
import { GONE, type CutTree, copyTree, createTree, insertLeaf, pruneTree, refreshTree } from './cut-tree.ts';
import { joinAlike } from './join-parts.ts';
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
  /** Whether gaps are rated by how closely a part fits, instead of by what is left over. */
  isCloseFit: boolean;
  /**
   * Puts the blocks held and then each unit of `out`, in its order, in the best place, opening stock while the limit permits.
   * A block that has no place falls apart.
   */
  recreate: (blink: number) => void;
  /** Takes a node of a tree, with all below it, out of the layout: into `out`, or held as a block until recreation. */
  remove: (tree: number, node: number, isHeld: boolean) => void;
  /** Holds some of what is out in blocks that share a side. */
  joinOut: () => void;
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
  const { partX, partY, canTurn, stockX, stockY, cost: price, count, kindOf, isRipFirst, problem } = model;
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
  // The root and the levels of the block sought a place for, in rip-first mode.
  let soughtRoot = 0;
  let soughtLevels = 0;

  let held: CutBlock[] = [];
  const mayTurn = (leaf: number) => problem.parts[kindOf[leaf >> 1] as number]?.turn === true;
  const fits = (x: number, y: number) => stockX.some((w, s) => x <= w && y <= (stockY[s] as number));

  const takeSpare = () => spare.pop() ?? createTree(32);

  const state: SheetState = {
    trees: [],
    out: [],
    cost: 0,
    limit: Infinity,
    isCloseFit: false,
    recreate,
    remove,
    joinOut,
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

  /**
   * Looks for the best gap for a piece of a size in trees from `from` on, for one of at least `area`; each place is overlooked
   * with probability `blink`.
   */
  function search(
    length: number,
    width: number,
    turns: number,
    area: number,
    blink: number,
    from: number,
  ): boolean {
    bestTree = -1;
    bestLoss = Infinity;
    const { trees, isCloseFit } = state;
    for (let b = from; b < trees.length; b++) {
      const tree = trees[b] as CutTree;
      if (tree.free < area) continue;
      const { gapX, gapY, gaps } = tree;
      for (let turned = 0; turned <= turns; turned++) {
        const x = turned ? width : length;
        const y = turned ? length : width;
        for (let i = 0; i < gaps; i++) {
          if ((gapX[i] as number) < x || (gapY[i] as number) < y) continue;
          if (
            soughtLevels > 0 &&
            !keepsStages(tree, i, turned ? crossOf(soughtRoot) : soughtRoot, soughtLevels)
          )
            continue;
          if (blink > 0 && random() < blink) continue;
          const loss = rateGap(tree, i, x, y, isRipFirst, scale, isCloseFit);
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

  function searchKind(kind: number, blink: number, from: number): boolean {
    const length = partX[kind] as number;
    const width = partY[kind] as number;
    return search(length, width, canTurn[kind] as number, length * width, blink, from);
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
    return searchKind(kind, 0, tree);
  }

  /** The units of a block go out one by one. */
  function breakUp(codes: readonly number[]): void {
    for (const code of codes) if (code >= 0) state.out.push(code >> 1);
  }

  function placeHeld(blink: number): void {
    held.sort((a, b) => b.x * b.y - a.x * a.y);
    for (const block of held) {
      if (isRipFirst) {
        soughtRoot = block.code[0] as number;
        soughtLevels = countLevels(block);
      }
      // A block may hold some waste, so a tree with somewhat less free area is looked at too.
      if (search(block.x, block.y, block.canTurn ? 1 : 0, 0.9 * block.x * block.y, blink, 0)) {
        const tree = touch(bestTree);
        insertBlock(tree, bestGap, bestTurn ? turnBlock(block) : block, isRipFirst);
        refreshTree(tree, isRipFirst, scale);
      } else breakUp(block.code);
    }
    soughtLevels = 0;
    held = [];
  }

  function joinOut(): void {
    const singles = state.out.map((unit) => {
      const kind = kindOf[unit] as number;
      return createBlock(unit * 2, partX[kind] as number, partY[kind] as number, mayTurn(unit * 2));
    });
    state.out = [];
    const joined = joinAlike([...held, ...singles], fits, random);
    held = joined.filter((block) => block.code.length > 1);
    for (const block of joined) if (block.code.length === 1) breakUp(block.code);
  }

  function recreate(blink: number): void {
    if (held.length > 0) placeHeld(blink);
    pass++;
    const still: number[] = [];
    for (const unit of state.out) {
      const kind = kindOf[unit] as number;
      if ((failedIn[kind] as number) === pass) still.push(unit);
      else if (searchKind(kind, blink, 0) || buy(kind)) put(unit);
      else {
        failedIn[kind] = pass;
        still.push(unit);
      }
    }
    state.out = still;
  }

  function remove(tree: number, node: number, isHeld: boolean): void {
    const t = touch(tree);
    const { code, parent } = t;
    if (isHeld) held.push(copyBlock(t, node, mayTurn));
    // Everything after a node that hangs below it comes before its next sibling.
    for (let i = node; i < t.size && (i === node || (parent[i] as number) >= node); i++) {
      if (!isHeld && (code[i] as number) >= 0) state.out.push((code[i] as number) >> 1);
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
