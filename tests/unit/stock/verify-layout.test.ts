import { describe, expect, it } from 'vitest';
import { layOut } from '#lib/stock/lay-out.ts';
import type { Cut, LaidPiece, Layout, Placement, SheetProblem, StockProblem } from '#lib/stock/types.ts';
import { type FaultRule, verifyLayout } from '#lib/stock/verify-layout.ts';
import { bar, barProblem, part, sheet, sheetProblem } from './problems.ts';

/**
 * A sheet of 100 x 60 with a trim of 2 and a kerf of 3, laid out by hand: a rip at 30 leaves a strip for A (40 x 30) and
 * B (50 x 30, less than the 53 that remain), and above it C, trimmed to 90 x 20.
 */
const problem: SheetProblem = sheetProblem({
  kerf: 3,
  trim: { left: 2, right: 2, bottom: 2, top: 2 },
  stock: [sheet('ply', 100, 60, 1, 7)],
  parts: [part('A', 40, 30, 1, false), part('B', 50, 30, 1, false), part('C', 90, 20, 1, false)],
});
const placements: Placement[] = [
  { part: 'A', piece: '6a', x: 2, y: 2, length: 40, width: 30, turned: false },
  { part: 'B', piece: '7a', x: 45, y: 2, length: 50, width: 30, turned: false },
  { part: 'C', piece: '9a', x: 2, y: 35, length: 90, width: 20, turned: false },
];
const cuts: Cut[] = [
  { number: 1, piece: 'whole', direction: 'rip', fence: 2, stage: 0, edge: 'bottom', yields: ['1a', null] },
  { number: 2, piece: '1a', direction: 'rip', fence: 2, stage: 0, edge: 'top', yields: ['2a', null] },
  { number: 3, piece: '2a', direction: 'crosscut', fence: 2, stage: 0, edge: 'left', yields: ['3a', null] },
  { number: 4, piece: '3a', direction: 'crosscut', fence: 2, stage: 0, edge: 'right', yields: ['4a', null] },
  { number: 5, piece: '4a', direction: 'rip', fence: 30, stage: 1, yields: ['5a', '5b'] },
  { number: 6, piece: '5a', direction: 'crosscut', fence: 40, stage: 2, yields: ['6a', '6b'] },
  { number: 7, piece: '6b', direction: 'crosscut', fence: 50, stage: 2, yields: ['7a', null] },
  { number: 8, piece: '5b', direction: 'rip', fence: 20, stage: 1, yields: ['8a', null] },
  { number: 9, piece: '8a', direction: 'crosscut', fence: 90, stage: 2, yields: ['9a', '9b'] },
];
const laid: LaidPiece = {
  stock: 'ply',
  length: 100,
  width: 60,
  placements,
  cuts,
  offcuts: [{ piece: '9b', x: 95, y: 35, length: 3, width: 20 }],
  yield: (40 * 30 + 50 * 30 + 90 * 20) / (100 * 60),
};
const sound: Layout = {
  kind: 'sheet',
  pieces: [laid],
  unplaced: [],
  newCost: 7,
  lowerBound: 7,
  isProved: true,
  steps: 0,
};

const rulesOf = (of: StockProblem, layout: Layout) =>
  new Set(verifyLayout(of, layout).map((fault) => fault.rule));
const withPiece = (change: Partial<LaidPiece>): Layout => ({ ...sound, pieces: [{ ...laid, ...change }] });
const withPlacement = (index: number, change: Partial<Placement>): Layout =>
  withPiece({ placements: placements.map((p, i) => (i === index ? { ...p, ...change } : p)) });
const withCut = (number: number, change: Partial<Cut>): Layout =>
  withPiece({ cuts: cuts.map((c) => (c.number === number ? { ...c, ...change } : c)) });

describe('a sound layout', () => {
  it('has no faults', () => {
    expect(verifyLayout(problem, sound)).toEqual([]);
  });
});

const planted: [string, FaultRule, StockProblem, Layout][] = [
  ['stock that is not there', 'unknown-stock', problem, withPiece({ stock: 'oak' })],
  ['a part that nobody asked for', 'unknown-part', problem, withPlacement(0, { part: 'Z' })],
  ['a sheet larger than it is', 'stock-size-changed', problem, withPiece({ length: 101 })],
  ['more sheets than there are', 'too-many-of-stock', problem, { ...sound, pieces: [laid, laid] }],
  ['a part cut too short', 'part-size-changed', problem, withPlacement(0, { length: 39 })],
  ['a part turned across its grain', 'grain-turned', problem, withPlacement(0, { turned: true })],
  ['a part in the trim', 'outside-stock', problem, withPlacement(0, { x: 1 })],
  ['a part beyond the far edge', 'outside-stock', problem, withPlacement(2, { x: 9 })],
  ['two parts over each other', 'overlap', problem, withPlacement(1, { x: 41 })],
  ['no room for the blade', 'kerf-missing', problem, withPlacement(1, { x: 44 })],
  ['a cut in a piece that is gone', 'cut-impossible', problem, withCut(7, { piece: '5a' })],
  ['a fence set beyond the piece', 'cut-impossible', problem, withCut(7, { fence: 53 })],
  ['a fence set to nothing', 'cut-impossible', problem, withCut(6, { fence: 0 })],
  ['a rest that the blade has taken', 'cut-impossible', problem, withCut(7, { yields: ['7a', '7b'] })],
  ['a name given twice', 'cut-impossible', problem, withCut(6, { yields: ['5b', '6b'] })],
  ['a trim cut in the wrong direction', 'cut-impossible', problem, withCut(3, { edge: 'top' })],
  ['cuts out of order', 'cut-order', problem, withPiece({ cuts: [...cuts].reverse() })],
  ['a cut of the wrong stage', 'cut-order', problem, withCut(8, { stage: 2 })],
  ['a stage hidden as trimming', 'cut-order', problem, withCut(8, { trims: true, stage: 0 })],
  ['cuts that yield another size', 'cut-result-differs', problem, withCut(6, { fence: 41 })],
  ['two parts from one piece', 'cut-result-differs', problem, withPlacement(1, { piece: '6a' })],
  [
    'an offcut of another size',
    'offcut-differs',
    problem,
    withPiece({ offcuts: [{ piece: '9b', x: 95, y: 35, length: 4, width: 20 }] }),
  ],
  ['an offcut that is not mentioned', 'offcut-differs', problem, withPiece({ offcuts: [] })],
  ['a yield made up', 'yield-differs', problem, withPiece({ yield: 0.9 })],
  ['a part left out', 'part-count', { ...problem, parts: [...problem.parts, part('D', 1, 1)] }, sound],
  [
    'a part cut twice',
    'part-count',
    { ...problem, stock: [sheet('ply', 100, 60, 2, 7)] },
    { ...sound, pieces: [laid, laid], newCost: 14 },
  ],
  [
    'a part refused that fits',
    'refusal-wrong',
    { ...problem, parts: [...problem.parts, part('D', 1, 1)] },
    { ...sound, unplaced: [{ part: 'D', qty: 1, reason: 'PART_EXCEEDS_STOCK' }] },
  ],
  [
    'a part called short of stock that never fits',
    'refusal-wrong',
    { ...problem, parts: [...problem.parts, part('D', 200, 1)] },
    { ...sound, unplaced: [{ part: 'D', qty: 1, reason: 'STOCK_EXHAUSTED' }] },
  ],
  ['a wrong cost', 'cost-differs', problem, { ...sound, newCost: 6 }],
  ['a bound above the cost', 'bound-above-cost', problem, { ...sound, lowerBound: 8 }],
  ['a proof without a bound', 'bound-above-cost', problem, { ...sound, lowerBound: 6 }],
];

describe('a planted fault', () => {
  it.each(planted)('is caught: %s', (_, rule, of, layout) => {
    expect(rulesOf(of, layout)).toContain(rule);
  });

  it('is caught in rip-first mode: a layout that crosscuts a second time', () => {
    // A pinwheel-free pattern of four stages: crosscut first, then rip, crosscut, rip.
    const deep = sheetProblem({
      stock: [sheet('s', 10, 10)],
      parts: [
        part('A', 4, 10, 1, false),
        part('B', 6, 5, 1, false),
        part('C', 3, 5, 1, false),
        part('D', 3, 3, 1, false),
        part('E', 3, 2, 1, false),
      ],
    });
    const layout = layOut(deep, { steps: 3000 });
    expect(layout.pieces).toHaveLength(1);
    expect(verifyLayout(deep, layout)).toEqual([]);
    expect(rulesOf({ ...deep, ripFirst: true }, layout)).toContain('stage-exceeded');
  });

  it('is caught on a bar: a part over a defect, or with a width', () => {
    const knotty = barProblem({
      stock: [{ ...bar('b', 100, 1), defects: [{ from: 40, to: 50 }] }],
      parts: [{ id: 'A', length: 40, qty: 1 }],
    });
    const layout = layOut(knotty, { steps: 0 });
    expect(verifyLayout(knotty, layout)).toEqual([]);
    const moved = { ...knotty, stock: [{ ...bar('b', 100, 1), defects: [{ from: 30, to: 35 }] }] };
    expect(rulesOf(moved, layout)).toContain('defect-hit');
    const [piece] = layout.pieces;
    expect(rulesOf(knotty, { ...layout, pieces: [{ ...(piece as LaidPiece), width: 1 }] })).toContain(
      'stock-size-changed',
    );
  });
});
