import { type CutBlock, joinBlocks, turnBlock } from './cut-block.ts';
import { ACROSS, UP } from './cut-tree.ts';

/** How much two sides may differ, as a share, to count as alike when waste is allowed for. */
const ALIKE = 0.03;
/** How often only exactly equal sides are joined. */
const EXACT = 0.5;

/**
 * Joins some of the blocks that share a side, so that they are placed as one: parts of one carcase mostly do, and what was cut
 * from one strip always does. Which and how many is drawn at random.
 */
export function joinAlike(
  blocks: CutBlock[],
  fits: (x: number, y: number) => boolean,
  random: () => number,
): CutBlock[] {
  const list = blocks.slice();
  const share = random() < EXACT ? 0 : ALIKE;
  let joins = 1 + Math.floor(random() * list.length);
  for (let tries = 2 * list.length; tries > 0 && joins > 0 && list.length > 1; tries--) {
    const i = Math.floor(random() * list.length);
    const a = list[i] as CutBlock;
    let chosen = -1;
    let direction = ACROSS;
    let isTurned = false;
    let seen = 0;
    let least = Infinity;
    for (let j = 0; j < list.length; j++) {
      if (j === i) continue;
      const b = list[j] as CutBlock;
      for (let turned = 0; turned <= (b.canTurn ? 1 : 0); turned++) {
        const x = turned ? b.y : b.x;
        const y = turned ? b.x : b.y;
        for (let up = 0; up < 2; up++) {
          const difference = up ? Math.abs(a.x - x) : Math.abs(a.y - y);
          if (difference > share * (up ? a.x : a.y)) continue;
          const joinedX = up ? Math.max(a.x, x) : a.x + x;
          const joinedY = up ? a.y + y : Math.max(a.y, y);
          if (!fits(joinedX, joinedY) && !(a.canTurn && b.canTurn && fits(joinedY, joinedX))) continue;
          // Of exact pairs any will do; of others the one with the least waste.
          const waste = difference * (up ? y : x);
          seen++;
          if (share === 0 ? random() * seen < 1 : waste < least) {
            least = waste;
            chosen = j;
            direction = up ? UP : ACROSS;
            isTurned = turned === 1;
          }
        }
      }
    }
    if (chosen < 0) continue;
    const b = list[chosen] as CutBlock;
    list[i] = joinBlocks(a, isTurned ? turnBlock(b) : b, direction);
    list[chosen] = list[list.length - 1] as CutBlock;
    list.pop();
    joins--;
  }
  return list;
}
