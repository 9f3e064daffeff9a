import { diveBars, relaxBars, roundUpCost } from './bar-columns.ts';
import { buildBarModel } from './bar-model.ts';
import { type FoundBars, createBarSearch } from './bar-search.ts';
import { createRandom } from './random.ts';
import { traceBar } from './trace-bar.ts';
import type { BarPart, BarProblem, LayOutOptions, Layout, Unplaced } from './types.ts';

const DEFAULT_STEPS = 10_000;
/** Beyond this many kinds and limited bars the linear program costs more than it gives. */
const MOST_ROWS = 150;
/** Dives through the relaxation, each more blurred than the one before. */
const MOST_DIVES = 12;
const BLUR = 0.1;

/**
 * Lays parts out along bars. In order: as many parts as can be, the least cost of new bars, the longest piece left over.
 * Anytime and deterministic, see LayOutOptions.
 * @throws Error when a length, kerf, trim, quantity or cost is not a whole number in its range.
 */
export function layOutBars(problem: BarProblem, options: LayOutOptions = {}): Layout {
  const model = buildBarModel(problem);
  const shouldStop = options.shouldStop ?? (() => false);
  const steps = options.steps ?? DEFAULT_STEPS;
  let best: Layout | null = null;
  let lowerBound = 0;

  function toLayout(found: FoundBars): Layout {
    const pieces = found.bars.map((pattern) => ({ stock: pattern.stock, piece: traceBar(model, pattern) }));
    pieces.sort(
      (a, b) =>
        (model.cost[a.stock] as number) - (model.cost[b.stock] as number) ||
        a.stock - b.stock ||
        b.piece.yield - a.piece.yield,
    );
    const left = new Map<string, number>();
    for (const kind of found.out) {
      const id = (problem.parts[model.partOf[kind] as number] as BarPart).id;
      left.set(id, (left.get(id) ?? 0) + 1);
    }
    const exhausted: Unplaced[] = [...left].map(([part, qty]) => ({ part, qty, reason: 'STOCK_EXHAUSTED' }));
    return {
      kind: 'bar',
      pieces: pieces.map(({ piece }) => piece),
      unplaced: [...model.refused, ...exhausted],
      newCost: found.cost,
      lowerBound: 0,
      isProved: false,
      steps: found.steps,
    };
  }

  function report(layout: Layout): void {
    const isWhole = layout.unplaced.every((u) => u.reason !== 'STOCK_EXHAUSTED');
    if (isWhole) {
      layout.lowerBound = Math.min(lowerBound, layout.newCost);
      layout.isProved = layout.newCost <= lowerBound;
    }
    best = layout;
    options.onBetter?.(layout);
  }

  const longestOf = (layout: Layout | null) =>
    (layout?.pieces ?? []).reduce((longest, piece) => Math.max(longest, piece.offcuts[0]?.length ?? 0), 0);

  const searchOptions = {
    seed: options.seed ?? 1,
    steps,
    shouldStop,
    lowerBound: 0,
    onFound: (found: FoundBars) => report(toLayout(found)),
    onGathered: (found: FoundBars) => {
      const layout = toLayout(found);
      if (longestOf(layout) > longestOf(best)) report(layout);
    },
  };
  const search = createBarSearch(model, searchOptions);
  search.start();
  const limited = model.isLimited.filter(Boolean).length;
  if (steps > 0 && model.size.length > 0 && model.size.length + limited <= MOST_ROWS) {
    const relaxed = relaxBars(model, model.wanted, model.count, shouldStop);
    lowerBound = roundUpCost(relaxed.bound, model.cost);
    searchOptions.lowerBound = lowerBound;
    const random = createRandom(options.seed ?? 1);
    for (let dive = 0; dive < MOST_DIVES && !search.isLeast() && !shouldStop(); dive++) {
      search.take(diveBars(model, relaxed, random, dive * BLUR, shouldStop));
    }
    // The bound came after the first answers: the best one may be settled by it.
    if (best) report(best);
  }
  search.run();
  if (!best) throw new Error('The search ended without a first answer.');
  return best;
}
