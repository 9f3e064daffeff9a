/**
 * A pattern of guillotine cuts on one piece of stock, as a tree kept in flat arrays in preorder.
 *
 * An inner node is a row of pieces: ACROSS lays them side by side along x (parted by crosscuts), UP stacks them along y
 * (parted by rips). The direction changes from each level to the next. A leaf is one part. Rows have no fixed size: a node
 * needs what its children need and may grow into whatever is free around it, so that no cut is decided before it must be.
 *
 * Sizes include one kerf at the far side of every part, and the stock is larger by one kerf to match: a layout without
 * kerf in those sizes is a layout with kerf between neighbours in the real ones.
 */

export const ACROSS = -1;
export const UP = -2;
/** A leaf that is to be removed by `pruneTree`. */
export const GONE = -9;

export interface CutTree {
  /** Index of the stock it is cut from, and that stock's usable size. */
  stock: number;
  width: number;
  height: number;
  /** Number of nodes. */
  size: number;
  /** ACROSS, UP, or for a leaf its unit times two, plus one when turned. */
  code: Int32Array;
  parent: Int32Array;
  depth: Int32Array;
  /** Least size. */
  needX: Float64Array;
  needY: Float64Array;
  /** Greatest size while the whole still fits the stock. */
  maxX: Float64Array;
  maxY: Float64Array;
  /** Size when nobody grows and what is left over lies at the end of each row. */
  allotX: Float64Array;
  allotY: Float64Array;
  /** Greatest part that can be put in at each node: at the end of a row, or beside a leaf. The last one lies beside the root. */
  gapX: Float64Array;
  gapY: Float64Array;
  gaps: number;
  /** Area not covered by parts. */
  free: number;
  /** Sum of the squared areas left over, in the square of the largest stock's area: high when the waste lies together. */
  leftover: number;
  /** The largest single area left over, in the largest stock's area. */
  largest: number;
}

/** An empty tree with room for `capacity` nodes. */
export function createTree(capacity: number): CutTree {
  return {
    stock: 0,
    width: 0,
    height: 0,
    size: 0,
    code: new Int32Array(capacity),
    parent: new Int32Array(capacity),
    depth: new Int32Array(capacity),
    needX: new Float64Array(capacity),
    needY: new Float64Array(capacity),
    maxX: new Float64Array(capacity),
    maxY: new Float64Array(capacity),
    allotX: new Float64Array(capacity),
    allotY: new Float64Array(capacity),
    gapX: new Float64Array(capacity + 1),
    gapY: new Float64Array(capacity + 1),
    gaps: 0,
    free: 0,
    leftover: 0,
    largest: 0,
  };
}

/** Makes room for `capacity` nodes. */
export function growTree(tree: CutTree, capacity: number): void {
  const larger = createTree(capacity);
  for (const key of ['code', 'parent', 'depth'] as const) {
    larger[key].set(tree[key]);
    tree[key] = larger[key];
  }
  for (const key of ['needX', 'needY', 'maxX', 'maxY', 'allotX', 'allotY', 'gapX', 'gapY'] as const) {
    larger[key].set(tree[key]);
    tree[key] = larger[key];
  }
}

/** Makes `to` equal to `from`. */
export function copyTree(from: CutTree, to: CutTree): void {
  const n = from.size;
  if (to.code.length < n + 2) growTree(to, 2 * n + 8);
  to.stock = from.stock;
  to.width = from.width;
  to.height = from.height;
  to.size = n;
  to.gaps = from.gaps;
  to.free = from.free;
  to.leftover = from.leftover;
  to.largest = from.largest;
  for (let i = 0; i < n; i++) {
    to.code[i] = from.code[i] as number;
    to.parent[i] = from.parent[i] as number;
    to.depth[i] = from.depth[i] as number;
    to.needX[i] = from.needX[i] as number;
    to.needY[i] = from.needY[i] as number;
    to.maxX[i] = from.maxX[i] as number;
    to.maxY[i] = from.maxY[i] as number;
    to.allotX[i] = from.allotX[i] as number;
    to.allotY[i] = from.allotY[i] as number;
    to.gapX[i] = from.gapX[i] as number;
    to.gapY[i] = from.gapY[i] as number;
  }
  to.gapX[n] = from.gapX[n] as number;
  to.gapY[n] = from.gapY[n] as number;
}

/** Works out everything that follows from the structure and the leaves' sizes. `scale` turns areas into shares of the largest stock. */
export function refreshTree(tree: CutTree, isRipFirst: boolean, scale: number): void {
  const n = tree.size;
  const { code, parent, depth, needX, needY, maxX, maxY, allotX, allotY, gapX, gapY } = tree;
  tree.gaps = n + 1;
  if (n === 0) {
    gapX[0] = tree.width;
    gapY[0] = tree.height;
    tree.free = tree.width * tree.height;
    tree.largest = tree.free * scale;
    tree.leftover = tree.largest ** 2;
    return;
  }
  for (let i = 0; i < n; i++) {
    if ((code[i] as number) < 0) {
      needX[i] = 0;
      needY[i] = 0;
    }
  }
  // Children stand after their parents, so one pass from the end sums up what each row needs.
  for (let i = n - 1; i > 0; i--) {
    const p = parent[i] as number;
    if ((code[p] as number) === ACROSS) {
      needX[p] = (needX[p] as number) + (needX[i] as number);
      if ((needY[i] as number) > (needY[p] as number)) needY[p] = needY[i] as number;
    } else {
      needY[p] = (needY[p] as number) + (needY[i] as number);
      if ((needX[i] as number) > (needX[p] as number)) needX[p] = needX[i] as number;
    }
  }
  maxX[0] = allotX[0] = tree.width;
  maxY[0] = allotY[0] = tree.height;
  depth[0] = 0;
  let used = 0;
  let leftover = 0;
  // Before anything else, a strip may be cut off along the whole sheet.
  let largest = tree.width * (tree.height - (needY[0] as number)) * scale;
  if (!isRipFirst) largest = Math.max(largest, (tree.width - (needX[0] as number)) * tree.height * scale);
  // And one pass from the front hands down how far each may grow.
  for (let i = 0; i < n; i++) {
    let along = UP;
    if (i > 0) {
      const p = parent[i] as number;
      depth[i] = (depth[p] as number) + 1;
      if ((code[p] as number) === ACROSS) {
        maxX[i] = (needX[i] as number) + (maxX[p] as number) - (needX[p] as number);
        maxY[i] = maxY[p] as number;
        allotX[i] = needX[i] as number;
        allotY[i] = allotY[p] as number;
      } else {
        maxY[i] = (needY[i] as number) + (maxY[p] as number) - (needY[p] as number);
        maxX[i] = maxX[p] as number;
        allotY[i] = needY[i] as number;
        allotX[i] = allotX[p] as number;
        along = ACROSS;
      }
    } else if (!isRipFirst) along = ACROSS;
    if ((code[i] as number) < 0) along = code[i] as number;
    else used += (needX[i] as number) * (needY[i] as number);
    let left;
    if (along === ACROSS) {
      gapX[i] = (maxX[i] as number) - (needX[i] as number);
      gapY[i] = maxY[i] as number;
      left = ((allotX[i] as number) - (needX[i] as number)) * (allotY[i] as number) * scale;
    } else {
      gapX[i] = maxX[i] as number;
      gapY[i] = (maxY[i] as number) - (needY[i] as number);
      left = ((allotY[i] as number) - (needY[i] as number)) * (allotX[i] as number) * scale;
    }
    leftover += left * left;
    if (left > largest) largest = left;
    // A leaf at depth 3 is stacked within a crosscut piece: pairing it would take a fourth stage.
    if (isRipFirst && (code[i] as number) >= 0 && (depth[i] as number) > 2) gapX[i] = 0;
  }
  if (isRipFirst) {
    gapX[n] = 0;
    gapY[n] = 0;
  } else if ((code[0] as number) === UP) {
    gapX[n] = maxX[0] - (needX[0] as number);
    gapY[n] = maxY[0];
  } else {
    gapX[n] = maxX[0];
    gapY[n] = maxY[0] - (needY[0] as number);
  }
  tree.free = tree.width * tree.height - used;
  tree.leftover = leftover;
  tree.largest = largest;
}

/** Puts a leaf of the given size into gap `at`. Only structure and leaves' sizes are kept up: refresh afterwards. */
export function insertLeaf(
  tree: CutTree,
  at: number,
  leaf: number,
  x: number,
  y: number,
  isRipFirst: boolean,
): void {
  const n = tree.size;
  if (tree.code.length < n + 3) growTree(tree, 2 * n + 8);
  const { code, parent, needX, needY } = tree;
  if (n === 0) {
    code[0] = leaf;
    parent[0] = -1;
    needX[0] = x;
    needY[0] = y;
    tree.size = 1;
    return;
  }
  const isRow = at < n && (code[at] as number) < 0;
  const moved = isRow ? 1 : 2;
  const from = at < n ? at : -1;
  for (let i = n - 1; i > from; i--) {
    const p = parent[i] as number;
    code[i + moved] = code[i] as number;
    parent[i + moved] = p > from ? p + moved : p;
    needX[i + moved] = needX[i] as number;
    needY[i + moved] = needY[i] as number;
  }
  if (isRow) {
    code[at + 1] = leaf;
    parent[at + 1] = at;
    needX[at + 1] = x;
    needY[at + 1] = y;
  } else if (at < n) {
    // The leaf gives its place to a row of itself and the new one.
    const p = parent[at] as number;
    code[at + 1] = code[at] as number;
    parent[at + 1] = at;
    needX[at + 1] = needX[at] as number;
    needY[at + 1] = needY[at] as number;
    code[at + 2] = leaf;
    parent[at + 2] = at;
    needX[at + 2] = x;
    needY[at + 2] = y;
    if (p < 0) code[at] = isRipFirst ? UP : ACROSS;
    else code[at] = (code[p] as number) === ACROSS ? UP : ACROSS;
  } else {
    // A new root holds the leaf and the old root, which now stands at 2.
    const was = code[2] as number;
    code[0] = was === UP ? ACROSS : UP;
    parent[0] = -1;
    code[1] = leaf;
    parent[1] = 0;
    needX[1] = x;
    needY[1] = y;
    parent[2] = 0;
  }
  tree.size = n + moved;
}

let live = new Int32Array(64);
let place = new Int32Array(64);

/** Takes out the leaves marked GONE and closes up rows left with one child or none. Refresh afterwards. */
export function pruneTree(tree: CutTree, isRipFirst: boolean): void {
  const n = tree.size;
  if (live.length < n) {
    live = new Int32Array(2 * n);
    place = new Int32Array(2 * n);
  }
  const { code, parent, needX, needY } = tree;
  for (let i = 0; i < n; i++) live[i] = 0;
  for (let i = n - 1; i > 0; i--) {
    if ((code[i] as number) >= 0 || ((code[i] as number) !== GONE && (live[i] as number) > 0))
      live[parent[i] as number] = (live[parent[i] as number] as number) + 1;
  }
  let m = 0;
  for (let i = 0; i < n; i++) {
    const c = code[i] as number;
    const up = i === 0 ? -1 : (place[parent[i] as number] as number);
    if (c >= 0) {
      code[m] = c;
      parent[m] = up;
      needX[m] = needX[i] as number;
      needY[m] = needY[i] as number;
      m++;
    } else if (c !== GONE && (live[i] as number) > 0) {
      // A row of one is its child; a row within a row of the same direction is part of it. A rip-first root stays.
      if ((live[i] as number) === 1 && !(isRipFirst && i === 0)) place[i] = up;
      else if (up >= 0 && (code[up] as number) === c) place[i] = up;
      else {
        code[m] = c;
        parent[m] = up;
        place[i] = m;
        m++;
      }
    }
  }
  if (m === 2 && (code[0] as number) < 0) {
    code[0] = code[1] as number;
    parent[0] = -1;
    needX[0] = needX[1] as number;
    needY[0] = needY[1] as number;
    m = 1;
  }
  tree.size = m;
}
