import { ACROSS, UP, type CutTree, growTree } from './cut-tree.ts';

/** Parts that stay together while patterns are changed: a small tree of its own, in the same preorder as a CutTree. */
export interface CutBlock {
  x: number;
  y: number;
  /** Whether every part in it may turn. */
  canTurn: boolean;
  code: number[];
  parent: number[];
  needX: number[];
  needY: number[];
}

/** The other direction. */
export function crossOf(direction: number): number {
  return direction === ACROSS ? UP : ACROSS;
}

/** A block of a single leaf. */
export function createBlock(leaf: number, x: number, y: number, canTurn: boolean): CutBlock {
  return { x, y, canTurn, code: [leaf], parent: [-1], needX: [x], needY: [y] };
}

/** Copies a node and all below it. */
export function copyBlock(tree: CutTree, node: number, mayTurn: (leaf: number) => boolean): CutBlock {
  const block: CutBlock = {
    x: tree.needX[node] as number,
    y: tree.needY[node] as number,
    canTurn: true,
    code: [],
    parent: [],
    needX: [],
    needY: [],
  };
  for (let i = node; i < tree.size && (i === node || (tree.parent[i] as number) >= node); i++) {
    const code = tree.code[i] as number;
    block.code.push(code);
    block.parent.push(i === node ? -1 : (tree.parent[i] as number) - node);
    block.needX.push(tree.needX[i] as number);
    block.needY.push(tree.needY[i] as number);
    if (code >= 0 && !mayTurn(code)) block.canTurn = false;
  }
  return block;
}

/** The block turned by a quarter. */
export function turnBlock(block: CutBlock): CutBlock {
  return {
    x: block.y,
    y: block.x,
    canTurn: block.canTurn,
    code: block.code.map((code) => (code < 0 ? crossOf(code) : code ^ 1)),
    parent: block.parent,
    needX: block.needY,
    needY: block.needX,
  };
}

/** Two blocks in a row in the given direction. */
export function joinBlocks(a: CutBlock, b: CutBlock, direction: number): CutBlock {
  const x = direction === ACROSS ? a.x + b.x : Math.max(a.x, b.x);
  const y = direction === ACROSS ? Math.max(a.y, b.y) : a.y + b.y;
  const joined: CutBlock = {
    x,
    y,
    canTurn: a.canTurn && b.canTurn,
    code: [direction],
    parent: [-1],
    needX: [x],
    needY: [y],
  };
  for (const block of [a, b]) {
    // A row in the same direction gives its children to the new row.
    const first = (block.code[0] as number) === direction ? 1 : 0;
    const offset = joined.code.length - first;
    for (let i = first; i < block.code.length; i++) {
      const p = block.parent[i] as number;
      joined.code.push(block.code[i] as number);
      joined.parent.push(p < first ? 0 : p + offset);
      joined.needX.push(block.needX[i] as number);
      joined.needY.push(block.needY[i] as number);
    }
  }
  return joined;
}

/** Direction of the row that a piece put into gap `at` becomes part of. */
function directionOf(tree: CutTree, at: number, isRipFirst: boolean): number {
  const { code, parent } = tree;
  if (at === tree.size) return (code[0] as number) === UP ? ACROSS : UP;
  if ((code[at] as number) < 0) return code[at] as number;
  if ((parent[at] as number) < 0) return isRipFirst ? UP : ACROSS;
  return crossOf(code[parent[at] as number] as number);
}

/** Rows within rows of a block: 0 for a single part. */
export function countLevels(block: CutBlock): number {
  const depth: number[] = [];
  let levels = 0;
  block.code.forEach((code, i) => {
    depth[i] = i === 0 ? 1 : (depth[block.parent[i] as number] as number) + 1;
    if (code < 0) levels = Math.max(levels, depth[i] as number);
  });
  return levels;
}

/** Whether a rip-first tree keeps to rips, crosscuts and rips when a block with this root and so many levels goes into gap `at`. */
export function keepsStages(tree: CutTree, at: number, root: number, levels: number): boolean {
  if (levels === 0) return true;
  if (tree.size === 0) return root === UP ? levels <= 3 : levels <= 2;
  if (at === tree.size) return false;
  const within = (tree.depth[at] as number) + levels;
  return (root === directionOf(tree, at, true) ? within - 1 : within) <= 2;
}

/** Puts a block into gap `at` of a tree (see `insertLeaf`). Refresh afterwards. */
export function insertBlock(tree: CutTree, at: number, block: CutBlock, isRipFirst: boolean): void {
  const n = tree.size;
  const blockSize = block.code.length;
  if (tree.code.length < n + blockSize + 3) growTree(tree, 2 * (n + blockSize) + 8);
  const { code, parent, needX, needY } = tree;
  if (n === 0) {
    // A rip-first root is a row of rips, be it of one.
    const start = isRipFirst && block.code[0] === ACROSS ? 1 : 0;
    code[0] = UP;
    parent[0] = -1;
    for (let i = 0; i < blockSize; i++) {
      code[i + start] = block.code[i] as number;
      parent[i + start] = (block.parent[i] as number) + start;
      needX[i + start] = block.needX[i] as number;
      needY[i + start] = block.needY[i] as number;
    }
    tree.size = blockSize + start;
    return;
  }
  const isRow = at < n && (code[at] as number) < 0;
  const isRoot = at === n;
  const direction = directionOf(tree, at, isRipFirst);
  const first = (block.code[0] as number) === direction ? 1 : 0;
  const moved = blockSize - first + (isRow ? 0 : 1);
  const from = isRoot ? -1 : at;
  for (let i = n - 1; i > from; i--) {
    const p = parent[i] as number;
    code[i + moved] = code[i] as number;
    parent[i + moved] = p > from ? p + moved : p;
    needX[i + moved] = needX[i] as number;
    needY[i + moved] = needY[i] as number;
  }
  // The row that takes the block in, and where its nodes start.
  const row = isRoot ? 0 : at;
  let start = row + 1;
  if (isRoot) {
    parent[moved] = 0;
    code[0] = direction;
    parent[0] = -1;
  } else if (!isRow) {
    code[at + 1] = code[at] as number;
    parent[at + 1] = at;
    needX[at + 1] = needX[at] as number;
    needY[at + 1] = needY[at] as number;
    code[at] = direction;
    start = at + 2;
  }
  const offset = start - first;
  for (let i = first; i < blockSize; i++) {
    const p = block.parent[i] as number;
    code[i + offset] = block.code[i] as number;
    parent[i + offset] = p < first ? row : p + offset;
    needX[i + offset] = block.needX[i] as number;
    needY[i + offset] = block.needY[i] as number;
  }
  tree.size = n + moved;
}
