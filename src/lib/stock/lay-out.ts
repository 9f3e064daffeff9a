import { layOutBars } from './lay-out-bars.ts';
import { layOutSheets } from './lay-out-sheets.ts';
import type { LayOutOptions, Layout, StockProblem } from './types.ts';

/**
 * Lays parts out on stock. Deterministic for a problem, a seed and a number of steps; with `shouldStop` it ends early and
 * gives the best layout so far. Parts that cannot be cut are named in `unplaced`.
 * @throws Error when a size, kerf, trim, quantity or cost is not a whole number in its range.
 */
export function layOut(problem: StockProblem, options: LayOutOptions = {}): Layout {
  return problem.kind === 'sheet' ? layOutSheets(problem, options) : layOutBars(problem, options);
}
