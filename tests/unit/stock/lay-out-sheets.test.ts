import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { layOutSheets } from '#lib/stock/lay-out-sheets.ts';
import type { Layout } from '#lib/stock/types.ts';
import { verifyLayout } from '#lib/stock/verify-layout.ts';
import { NO_TRIM, anySheetProblem, cutUpSheets, part, sheet, sheetProblem } from './problems.ts';

const placementsOf = (layout: Layout) => layout.pieces.flatMap((piece) => piece.placements);
const largestOffcut = (layout: Layout) =>
  Math.max(0, ...layout.pieces.flatMap((piece) => piece.offcuts.map((o) => o.length * o.width)));

describe('any layout of sheets', () => {
  it('passes the verifier, whatever the stock, the trim, the grain and the mode', () => {
    fc.assert(
      fc.property(anySheetProblem, fc.integer({ min: 0, max: 1000 }), (problem, seed) => {
        expect(verifyLayout(problem, layOutSheets(problem, { steps: 150, seed }))).toEqual([]);
      }),
      { numRuns: 300, seed: 7 },
    );
  });

  it('is the same for the same problem, seed and number of steps', () => {
    const problem = cutUpSheets(3, 3, 9, 32);
    const first = layOutSheets(problem, { steps: 400, seed: 5 });
    expect(layOutSheets(problem, { steps: 400, seed: 5 })).toEqual(first);
  });

  it('never gets worse with more steps', () => {
    fc.assert(
      fc.property(anySheetProblem, (problem) => {
        const few = layOutSheets(problem, { steps: 0 });
        const many = layOutSheets(problem, { steps: 200 });
        const unplaced = (layout: Layout) => layout.unplaced.reduce((sum, u) => sum + u.qty, 0);
        if (unplaced(few) === 0) {
          expect(unplaced(many)).toBe(0);
          expect(many.newCost).toBeLessThanOrEqual(few.newCost);
        }
      }),
      { numRuns: 60, seed: 11 },
    );
  });

  it('reports each better layout, each of them sound, and returns the last', () => {
    const problem = cutUpSheets(6, 2, 6, 32);
    const reported: Layout[] = [];
    const last = layOutSheets(problem, { steps: 4000, onBetter: (layout) => reported.push(layout) });
    expect(reported.length).toBeGreaterThan(1);
    expect(reported.at(-1)).toEqual(last);
    for (const layout of reported) expect(verifyLayout(problem, layout)).toEqual([]);
    const costs = reported.map((layout) => layout.newCost);
    expect(costs).toEqual([...costs].sort((a, b) => b - a));
  });

  it('stops when the caller says so, with the first answer at hand', () => {
    const problem = cutUpSheets(4, 4, 12, 0);
    let asked = 0;
    const layout = layOutSheets(problem, { steps: 1_000_000, shouldStop: () => ++asked > 3 });
    expect(layout.steps).toBeLessThan(200);
    expect(verifyLayout(problem, layout)).toEqual([]);
  });
});

describe('kerf and trim', () => {
  it('counts a kerf between parts but none at the edge', () => {
    // 3 x 32 + 2 x 2 = 100.
    const fits = sheetProblem({ kerf: 2, parts: [part('A', 32, 100, 3)] });
    expect(layOutSheets(fits).pieces).toHaveLength(1);
    // One unit more has to go to a second sheet.
    const tight = sheetProblem({
      kerf: 2,
      parts: [part('A', 32, 100, 2, false), part('B', 33, 100, 1, false)],
    });
    expect(layOutSheets(tight).pieces).toHaveLength(2);
  });

  it('lets the blade take less than a kerf when it only trims a part to size', () => {
    const problem = sheetProblem({ kerf: 5, parts: [part('A', 98, 100, 1, false)] });
    const layout = layOutSheets(problem);
    expect(layout.pieces[0]?.cuts).toHaveLength(1);
    expect(layout.pieces[0]?.cuts[0]).toMatchObject({
      direction: 'crosscut',
      fence: 98,
      yields: ['1a', null],
    });
    expect(layout.pieces[0]?.offcuts).toEqual([]);
    expect(verifyLayout(problem, layout)).toEqual([]);
  });

  it('trims each edge by its own amount, and a stock size by its own trim where it has one', () => {
    const trim = { left: 10, right: 20, bottom: 5, top: 15 };
    const problem = sheetProblem({ trim, parts: [part('A', 70, 80, 1, false)] });
    const layout = layOutSheets(problem);
    expect(placementsOf(layout)).toMatchObject([{ x: 10, y: 5 }]);
    expect(layout.pieces[0]?.cuts.map((cut) => [cut.edge, cut.fence, cut.stage])).toEqual([
      ['bottom', 5, 0],
      ['top', 15, 0],
      ['left', 10, 0],
      ['right', 20, 0],
    ]);
    const larger = sheetProblem({ trim, parts: [part('A', 71, 80, 1, false)] });
    expect(layOutSheets(larger).unplaced).toEqual([{ part: 'A', qty: 1, reason: 'PART_EXCEEDS_STOCK' }]);
    const untrimmed = { ...larger, stock: [{ ...sheet('own', 100, 100, 1, 0), trim: NO_TRIM }] };
    expect(layOutSheets(untrimmed).unplaced).toEqual([]);
  });

  it('keeps nanometres exact on a full sheet', () => {
    // 8 x 4 ft with a kerf of 3/32 in, in nanometres: three parts of 31 15/16 in and two kerfs are 96 in.
    const inch = 25_400_000;
    const kerf = (3 * inch) / 32;
    const third = (31 + 15 / 16) * inch;
    const problem = sheetProblem({
      kerf,
      stock: [sheet('ply', 96 * inch, 48 * inch)],
      parts: [part('A', third, 48 * inch, 3, false)],
    });
    const layout = layOutSheets(problem);
    expect(layout.pieces).toHaveLength(1);
    expect(layout.pieces[0]?.yield).toBeCloseTo((3 * third) / (96 * inch), 12);
    expect(verifyLayout(problem, layout)).toEqual([]);
  });
});

describe('grain', () => {
  it('turns a part only where it may', () => {
    const stock = [sheet('strip', 100, 40)];
    const fixed = sheetProblem({ stock, parts: [part('A', 40, 100, 1, false)] });
    expect(layOutSheets(fixed).unplaced).toEqual([{ part: 'A', qty: 1, reason: 'PART_EXCEEDS_STOCK' }]);
    const free = sheetProblem({ stock, parts: [part('A', 40, 100)] });
    expect(placementsOf(layOutSheets(free))).toMatchObject([{ length: 100, width: 40, turned: true }]);
  });
});

describe('stock', () => {
  it("uses the buyer's own offcuts first, and each only as often as it is there", () => {
    const problem = sheetProblem({
      stock: [sheet('new', 100, 100, null, 30), sheet('offcut', 50, 50, 2, 0)],
      parts: [part('A', 50, 50, 2)],
    });
    const layout = layOutSheets(problem);
    expect(layout.newCost).toBe(0);
    expect(layout.pieces.map((piece) => piece.stock)).toEqual(['offcut', 'offcut']);
    const three = layOutSheets({ ...problem, parts: [part('A', 50, 50, 3)] });
    expect(three.newCost).toBe(30);
    expect(verifyLayout({ ...problem, parts: [part('A', 50, 50, 3)] }, three)).toEqual([]);
  });

  it('buys the sizes that cost least together, not the largest', () => {
    // Four parts fit one large sheet at 100 or two small ones at 45 each.
    const problem = sheetProblem({
      stock: [sheet('large', 200, 100, null, 100), sheet('small', 100, 100, null, 45)],
      parts: [part('A', 100, 50, 4, false)],
    });
    expect(layOutSheets(problem, { steps: 2000 })).toMatchObject({
      newCost: 90,
      lowerBound: 90,
      isProved: true,
    });
  });

  it('names parts larger than any stock, and lays the others', () => {
    const problem = sheetProblem({ parts: [part('long', 101, 10, 2), part('A', 10, 10)] });
    const layout = layOutSheets(problem);
    expect(layout.unplaced).toEqual([{ part: 'long', qty: 2, reason: 'PART_EXCEEDS_STOCK' }]);
    expect(placementsOf(layout).map((p) => p.part)).toEqual(['A']);
  });

  it('lays as much as it can when the stock runs out, and says what is missing', () => {
    const problem = sheetProblem({ stock: [sheet('last', 100, 100, 1)], parts: [part('A', 50, 100, 3)] });
    const layout = layOutSheets(problem, { steps: 300 });
    expect(layout.unplaced).toEqual([{ part: 'A', qty: 1, reason: 'STOCK_EXHAUSTED' }]);
    expect(layout.isProved).toBe(false);
    expect(verifyLayout(problem, layout)).toEqual([]);
  });

  it('has nothing to do without parts, and refuses all without stock', () => {
    expect(layOutSheets(sheetProblem({}))).toMatchObject({
      pieces: [],
      newCost: 0,
      lowerBound: 0,
      isProved: true,
    });
    const layout = layOutSheets(sheetProblem({ stock: [], parts: [part('A', 1, 1)] }));
    expect(layout).toMatchObject({
      pieces: [],
      unplaced: [{ part: 'A', qty: 1, reason: 'PART_EXCEEDS_STOCK' }],
    });
  });

  it('refuses sizes that are not whole', () => {
    expect(() => layOutSheets(sheetProblem({ parts: [part('A', 1.5, 1)] }))).toThrow('whole and positive');
    expect(() => layOutSheets(sheetProblem({ kerf: -1 }))).toThrow('not negative');
  });
});

describe('how good it is', () => {
  it.each([1, 2, 3, 4, 5, 6])('puts a sheet that was cut up back together (%i)', (seed) => {
    const problem = cutUpSheets(seed, 1, 5, 32);
    const layout = layOutSheets(problem, { steps: 20_000 });
    expect(layout).toMatchObject({ newCost: 1, lowerBound: 1, isProved: true });
    expect(layout.pieces[0]?.offcuts).toEqual([]);
  });

  it('finds the optimum where a greedy order fails', () => {
    // Two sheets of 10 x 10: 6x10 with 4x10, twice; by area first 6s go alone, but 5x10s must not be mixed in.
    const problem = sheetProblem({
      stock: [sheet('s', 10, 10)],
      parts: [part('A', 6, 10, 2, false), part('B', 4, 10, 2, false), part('C', 5, 10, 2, false)],
    });
    expect(layOutSheets(problem)).toMatchObject({ newCost: 3, isProved: true });
  });

  it('gathers what is left over into one rectangle', () => {
    // Ten parts of 20 x 20 leave 100 x 60 at best: two rips of ten parts in two rows.
    const problem = sheetProblem({ parts: [part('A', 20, 20, 10)] });
    expect(largestOffcut(layOutSheets(problem, { steps: 5000 }))).toBe(6000);
  });
});

describe('rip-first mode', () => {
  it('begins with rips and has at most three stages, trimming apart', () => {
    const problem = { ...cutUpSheets(9, 2, 8, 32), ripFirst: true };
    const layout = layOutSheets(problem, { steps: 2000 });
    expect(verifyLayout(problem, layout)).toEqual([]);
    for (const piece of layout.pieces) {
      expect(piece.cuts[0]?.direction).toBe('rip');
      expect(Math.max(...piece.cuts.map((cut) => cut.stage))).toBeLessThanOrEqual(3);
      const partPieces = new Set(piece.placements.map((p) => p.piece));
      for (const cut of piece.cuts) if (cut.trims) expect(partPieces).toContain(cut.yields[0]);
    }
  });
});

describe('the order of the cuts', () => {
  it('makes all cuts of a stage before the next, and equal settings one after another', () => {
    const problem = sheetProblem({
      kerf: 1,
      ripFirst: true,
      parts: [part('A', 30, 20, 6, false), part('B', 45, 20, 4, false)],
    });
    const cuts = layOutSheets(problem, { steps: 500 }).pieces[0]?.cuts ?? [];
    expect(cuts.map((cut) => cut.number)).toEqual(cuts.map((_, i) => i + 1));
    const stages = cuts.map((cut) => cut.stage);
    expect(stages).toEqual([...stages].sort((a, b) => a - b));
    const settings = cuts.map((cut) => `${cut.direction} ${cut.fence}`);
    // Within a stage no setting is left and taken up again, save where a piece had to be cut to another size first.
    const runs = settings.filter((setting, i) => setting !== settings[i - 1]);
    expect(runs).toHaveLength(new Set(cuts.map((cut) => `${cut.stage} ${cut.direction} ${cut.fence}`)).size);
  });
});
