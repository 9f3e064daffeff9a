import { ACROSS, UP, type CutTree } from './cut-tree.ts';

/** What an area of growth costs that no leftover nearby pays for, against squared leftovers. */
const UNPAID_GROWTH = 1;
/** Weight of the less close side in a close fit. */
const SECOND_SIDE = 1e-4;

function lossOf(leftover: number, taken: number): number {
  if (leftover <= taken) return leftover * leftover + UNPAID_GROWTH * (taken - leftover);
  const rest = leftover - taken;
  return leftover * leftover - rest * rest;
}

/**
 * How much the sum of squared leftover areas falls when a part of size x by y goes into gap `at`: the less, the better the
 * place, since large leftovers stay whole and strips of waste count for nothing. Growth of rows further out is estimated.
 * With `isCloseFit` the closer of the two differences between part and gap counts instead, which finds what belongs together.
 * Rating by squared leftovers follows Gardeyn and Wauters (arXiv 2508.19306).
 */
export function rateGap(
  tree: CutTree,
  at: number,
  x: number,
  y: number,
  isRipFirst: boolean,
  scale: number,
  isCloseFit: boolean,
): number {
  const { code, parent, needX, needY, allotX, allotY } = tree;
  if (tree.size === 0) {
    if (isCloseFit) return Math.min(tree.width - x, tree.height - y);
    const end = (tree.width - x) * tree.height * scale;
    const beside = x * (tree.height - y) * scale;
    return tree.leftover - end * end - beside * beside;
  }
  let node = at;
  let across: boolean;
  if (at === tree.size) {
    node = 0;
    across = (code[0] as number) === UP;
  } else if ((code[at] as number) < 0) across = (code[at] as number) === ACROSS;
  else across = at === 0 ? !isRipFirst : (code[parent[at] as number] as number) === UP;
  // In the frame of the row: u runs along it, v across it.
  let needU, allotU, allotV, u, v;
  if (across) {
    needU = needX[node] as number;
    allotU = allotX[node] as number;
    allotV = allotY[node] as number;
    u = x;
    v = y;
  } else {
    needU = needY[node] as number;
    allotU = allotY[node] as number;
    allotV = allotX[node] as number;
    u = y;
    v = x;
  }
  const growV = v - allotV;
  const growU = needU + u - allotU;
  if (isCloseFit) {
    const byV = Math.abs(growV);
    const byU = Math.abs(growU);
    return byV < byU ? byV + byU * SECOND_SIDE : byU + byV * SECOND_SIDE;
  }
  const crossV = growV > 0 ? v : allotV;
  const before = (allotU - needU) * allotV * scale;
  const after = growU > 0 ? 0 : -growU * crossV * scale;
  const beside = u * (crossV - v) * scale;
  let loss = before * before - after * after - beside * beside;
  const p = parent[node] as number;
  if (p >= 0) {
    if (growV > 0) {
      const other = across ? (allotX[p] as number) : (allotY[p] as number);
      const leftover = across
        ? ((allotY[p] as number) - (needY[p] as number)) * other
        : ((allotX[p] as number) - (needX[p] as number)) * other;
      loss += lossOf(leftover * scale, growV * other * scale);
    }
    const g = parent[p] as number;
    if (growU > 0 && g >= 0) {
      const other = across ? (allotY[g] as number) : (allotX[g] as number);
      const leftover = across
        ? ((allotX[g] as number) - (needX[g] as number)) * other
        : ((allotY[g] as number) - (needY[g] as number)) * other;
      loss += lossOf(leftover * scale, growU * other * scale);
    }
  }
  return loss;
}
