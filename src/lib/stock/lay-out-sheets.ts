import { boundSheets } from './sheet-bound.ts';
import { buildSheetModel } from './sheet-model.ts';
import { type FoundSheets, searchSheets } from './sheet-search.ts';
import { traceTree } from './trace-tree.ts';
import type { Cut, LaidPiece, LayOutOptions, Layout, SheetPart, SheetProblem, Unplaced } from './types.ts';

const DEFAULT_STEPS = 20_000;

/** What tells layouts of one cost apart: the largest offcut's area, how often the fence is set, how many cuts there are. */
function judge(pieces: readonly LaidPiece[]): { largest: number; settings: number; cuts: number } {
  let largest = 0;
  let settings = 0;
  let cuts = 0;
  for (const piece of pieces) {
    cuts += piece.cuts.length;
    let before: Cut | undefined;
    for (const cut of piece.cuts) {
      if (cut.direction !== before?.direction || cut.fence !== before.fence) settings++;
      before = cut;
    }
    const first = piece.offcuts[0];
    if (first) largest = Math.max(largest, first.length * first.width);
  }
  return { largest, settings, cuts };
}

function isBetter(now: readonly LaidPiece[], before: readonly LaidPiece[]): boolean {
  const a = judge(now);
  const b = judge(before);
  return (
    a.largest - b.largest > 0 || (a.largest === b.largest && (a.settings - b.settings || a.cuts - b.cuts) < 0)
  );
}

/**
 * Lays parts out on sheets or boards by cuts that go right through. In order: as many parts as can be, the least cost of new
 * stock, the largest rectangle left over, the fewest fence settings and cuts. Anytime and deterministic, see LayOutOptions.
 * @throws Error when a size, kerf, trim, quantity or cost is not a whole number in its range.
 */
export function layOutSheets(problem: SheetProblem, options: LayOutOptions = {}): Layout {
  const model = buildSheetModel(problem);
  let lowerBound = 0;
  let best: Layout | null = null;

  /** Works the bound out, and tells of it where it settles the first answer. */
  function proveBound(): number {
    const bound = boundSheets(model);
    lowerBound = Number.isFinite(bound) ? bound : 0;
    if (best && best.lowerBound !== lowerBound && best.unplaced.length === model.refused.length) {
      report({ ...best, lowerBound, isProved: best.newCost <= lowerBound });
    }
    return lowerBound;
  }

  function toLayout(found: FoundSheets): Layout {
    const pieces = found.trees.map((tree) => ({ stock: tree.stock, piece: traceTree(model, tree) }));
    pieces.sort(
      (a, b) =>
        (model.cost[a.stock] as number) - (model.cost[b.stock] as number) ||
        a.stock - b.stock ||
        b.piece.yield - a.piece.yield,
    );
    const left = new Map<string, number>();
    for (const unit of found.out) {
      const id = (problem.parts[model.kindOf[unit] as number] as SheetPart).id;
      left.set(id, (left.get(id) ?? 0) + 1);
    }
    const exhausted: Unplaced[] = [...left].map(([part, qty]) => ({ part, qty, reason: 'STOCK_EXHAUSTED' }));
    const isWhole = exhausted.length === 0;
    return {
      kind: 'sheet',
      pieces: pieces.map(({ piece }) => piece),
      unplaced: [...model.refused, ...exhausted],
      newCost: found.cost,
      lowerBound: isWhole ? lowerBound : 0,
      isProved: isWhole && found.cost <= lowerBound,
      steps: found.steps,
    };
  }

  function report(layout: Layout): void {
    best = layout;
    options.onBetter?.(layout);
  }

  searchSheets(model, {
    seed: options.seed ?? 1,
    steps: options.steps ?? DEFAULT_STEPS,
    proveBound,
    shouldStop: options.shouldStop ?? (() => false),
    onFound: (found) => report(toLayout(found)),
    onGathered: (found) => {
      const layout = toLayout(found);
      if (isBetter(layout.pieces, best?.pieces ?? [])) report(layout);
    },
  });
  if (!best) throw new Error('The search ended without a first answer.');
  return best;
}
