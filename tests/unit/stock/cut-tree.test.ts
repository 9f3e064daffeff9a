import { describe, expect, it } from 'vitest';
import { copyBlock, createBlock, insertBlock, joinBlocks, turnBlock } from '#lib/stock/cut-block.ts';
import {
  ACROSS,
  type CutTree,
  GONE,
  UP,
  copyTree,
  createTree,
  insertLeaf,
  pruneTree,
  refreshTree,
} from '#lib/stock/cut-tree.ts';
import { createRandom } from '#lib/stock/random.ts';

const RIP_FIRST = false;

function emptyTree(width = 100, height = 100): CutTree {
  const tree = createTree(4);
  tree.width = width;
  tree.height = height;
  refreshTree(tree, RIP_FIRST, 1);
  return tree;
}

/** What must hold in every tree, worked out from the structure alone. */
function expectSound(tree: CutTree): void {
  for (let i = 0; i < tree.size; i++) {
    const children = [...Array(tree.size).keys()].filter((j) => j > 0 && tree.parent[j] === i);
    if ((tree.code[i] ?? 0) >= 0) expect(children).toEqual([]);
    else {
      expect(children.length).toBeGreaterThan(1);
      for (const child of children) expect(tree.code[child]).not.toBe(tree.code[i]);
      const [along, across] = tree.code[i] === ACROSS ? [tree.needX, tree.needY] : [tree.needY, tree.needX];
      expect(along[i]).toBe(children.reduce((sum, child) => sum + (along[child] ?? 0), 0));
      expect(across[i]).toBe(Math.max(...children.map((child) => across[child] ?? 0)));
    }
  }
  if (tree.size > 0) {
    expect(tree.needX[0]).toBeLessThanOrEqual(tree.width);
    expect(tree.needY[0]).toBeLessThanOrEqual(tree.height);
  }
}

const leavesOf = (tree: CutTree) =>
  [...tree.code.slice(0, tree.size)].filter((code) => code >= 0).sort((a, b) => a - b);

describe('a cut tree', () => {
  it('offers gaps beside a leaf, above it, and at the end of a row', () => {
    const tree = emptyTree();
    insertLeaf(tree, 0, 0, 60, 30, RIP_FIRST);
    refreshTree(tree, RIP_FIRST, 1);
    expect([...tree.gapX.slice(0, tree.gaps)]).toEqual([40, 100]);
    expect([...tree.gapY.slice(0, tree.gaps)]).toEqual([100, 70]);
    insertLeaf(tree, 0, 2, 40, 50, RIP_FIRST);
    refreshTree(tree, RIP_FIRST, 1);
    // The row is full along x; above the first leaf 70 are free, above the second 50, above both 50.
    expect([...tree.code.slice(0, 3)]).toEqual([ACROSS, 0, 2]);
    expect([...tree.gapX.slice(0, tree.gaps)]).toEqual([0, 60, 40, 100]);
    expect([...tree.gapY.slice(0, tree.gaps)]).toEqual([100, 70, 50, 50]);
  });

  it('stays sound through any changes, and loses no part', () => {
    const random = createRandom(17);
    const tree = emptyTree();
    const inside = new Set<number>();
    let next = 0;
    for (let step = 0; step < 2000; step++) {
      if (random() < 0.6) {
        const x = 3 + Math.floor(random() * 30);
        const y = 3 + Math.floor(random() * 30);
        const gaps = [...Array(tree.gaps).keys()].filter(
          (g) => (tree.gapX[g] ?? 0) >= x && (tree.gapY[g] ?? 0) >= y,
        );
        const gap = gaps[Math.floor(random() * gaps.length)];
        if (gap === undefined) continue;
        insertLeaf(tree, gap, next * 2, x, y, RIP_FIRST);
        inside.add(next * 2);
        next++;
      } else if (tree.size > 0) {
        const node = Math.floor(random() * tree.size);
        const end =
          [...Array(tree.size).keys()].find((j) => j > node && (tree.parent[j] ?? 0) < node) ?? tree.size;
        for (let i = node; i < end; i++) {
          inside.delete(tree.code[i] ?? 0);
          tree.code[i] = GONE;
        }
        pruneTree(tree, RIP_FIRST);
      }
      refreshTree(tree, RIP_FIRST, 1);
      expectSound(tree);
      expect(leavesOf(tree)).toEqual([...inside].sort((a, b) => a - b));
    }
    const copy = emptyTree();
    copyTree(tree, copy);
    expect(leavesOf(copy)).toEqual(leavesOf(tree));
  });
});

describe('a block', () => {
  const a = createBlock(0, 30, 20, true);
  const b = createBlock(2, 30, 10, true);
  const c = createBlock(4, 15, 30, true);

  it('joins rows of one direction into one, and turns with all that is in it', () => {
    const stack = joinBlocks(joinBlocks(a, b, UP), createBlock(6, 25, 5, false), UP);
    expect(stack).toMatchObject({ x: 30, y: 35, canTurn: false, code: [UP, 0, 2, 6] });
    const row = joinBlocks(joinBlocks(a, b, UP), c, ACROSS);
    expect(row).toMatchObject({
      x: 45,
      y: 30,
      canTurn: true,
      code: [ACROSS, UP, 0, 2, 4],
      parent: [-1, 0, 1, 1, 0],
    });
    expect(turnBlock(row)).toMatchObject({
      x: 30,
      y: 45,
      code: [UP, ACROSS, 1, 3, 5],
      needX: [30, 30, 20, 10, 30],
    });
  });

  it('goes into any gap of a tree and comes out as it went in', () => {
    const row = joinBlocks(joinBlocks(a, b, UP), c, ACROSS);
    for (let leaves = 0; leaves <= 3; leaves++) {
      for (let gap = 0; ; gap++) {
        const tree = emptyTree(200, 200);
        for (let k = 0; k < leaves; k++) {
          insertLeaf(tree, k === 2 ? 1 : 0, 100 + 2 * k, 20 + k, 25 - k, RIP_FIRST);
          refreshTree(tree, RIP_FIRST, 1);
        }
        if (gap >= tree.gaps) break;
        for (const block of [row, turnBlock(row)]) {
          const filled = emptyTree(200, 200);
          copyTree(tree, filled);
          insertBlock(filled, gap, block, RIP_FIRST);
          refreshTree(filled, RIP_FIRST, 1);
          expectSound(filled);
          expect(leavesOf(filled)).toHaveLength(leaves + 3);
        }
      }
    }
    const alone = emptyTree();
    insertBlock(alone, 0, row, RIP_FIRST);
    refreshTree(alone, RIP_FIRST, 1);
    expect(copyBlock(alone, 0, () => true)).toEqual(row);
  });
});
