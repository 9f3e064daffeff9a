import { describe, expect, it } from 'vitest';
import { type BenchPiece, scheduleCuts } from '#lib/stock/schedule-cuts.ts';
import { NO_TRIM } from './problems.ts';

/** A strip of 60 x 20 that is crosscut to 30 and 20, the kerf being 5: nothing is left. */
function strip(y: number, id: string): BenchPiece {
  const part = (x: number, length: number, name: string): BenchPiece => ({
    x,
    y,
    length,
    width: 20,
    part: { id: name, turned: false },
  });
  return {
    x: 0,
    y,
    length: 60,
    width: 20,
    split: { direction: 'crosscut', pieces: [part(0, 30, `${id}1`), part(35, 20, `${id}2`)], rest: null },
  };
}
const whole: BenchPiece = {
  x: 0,
  y: 0,
  length: 60,
  width: 45,
  split: { direction: 'rip', pieces: [strip(0, 'A')], rest: strip(25, 'B') },
};

describe('the order of the cuts', () => {
  it('serves every piece that wants a setting before the fence is moved', () => {
    const { cuts } = scheduleCuts(whole, NO_TRIM, Infinity);
    expect(cuts.map((cut) => `${cut.piece} ${cut.direction} ${cut.fence}`)).toEqual([
      'whole rip 20',
      '1a crosscut 30',
      '1b crosscut 30',
      '2b crosscut 20',
      '3b crosscut 20',
    ]);
  });

  it('names the piece of each part, and trims before all else', () => {
    const { cuts, placements, offcuts } = scheduleCuts(whole, { ...NO_TRIM, left: 4 }, Infinity);
    expect(cuts[0]).toEqual({
      number: 1,
      piece: 'whole',
      direction: 'crosscut',
      fence: 4,
      stage: 0,
      edge: 'left',
      yields: ['1a', null],
    });
    expect(cuts[1]).toMatchObject({ piece: '1a', stage: 1 });
    expect(Object.fromEntries(placements.map((p) => [p.part, p.piece]))).toEqual({
      A1: '3a',
      B1: '4a',
      A2: '5a',
      B2: '6a',
    });
    expect(offcuts).toEqual([]);
  });

  it('counts what lies beyond the last stage as trimming', () => {
    const { cuts } = scheduleCuts(whole, NO_TRIM, 1);
    expect(cuts.map((cut) => [cut.stage, cut.trims])).toEqual([
      [1, undefined],
      [1, true],
      [1, true],
      [1, true],
      [1, true],
    ]);
  });
});
