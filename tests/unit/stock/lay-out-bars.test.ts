import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { layOutBars } from '#lib/stock/lay-out-bars.ts';
import { verifyLayout } from '#lib/stock/verify-layout.ts';
import { anyBarProblem, bar, barProblem } from './problems.ts';

const part = (id: string, length: number, qty = 1) => ({ id, length, qty });

describe('any layout of bars', () => {
  it('passes the verifier, whatever the stock, the trim and the defects', () => {
    fc.assert(
      fc.property(anyBarProblem, fc.integer({ min: 0, max: 1000 }), (problem, seed) => {
        expect(verifyLayout(problem, layOutBars(problem, { steps: 150, seed }))).toEqual([]);
      }),
      { numRuns: 300, seed: 7 },
    );
  });

  it('is never below the least number that an exhaustive search finds, nor is its bound above it', () => {
    const small = fc.record({
      kerf: fc.integer({ min: 0, max: 2 }),
      lengths: fc.array(fc.integer({ min: 5, max: 30 }), { minLength: 1, maxLength: 7 }),
    });
    fc.assert(
      fc.property(small, ({ kerf, lengths }) => {
        const problem = barProblem({
          kerf,
          stock: [bar('b', 40)],
          parts: lengths.map((l, i) => part(`P${i}`, l)),
        });
        const layout = layOutBars(problem, { steps: 500 });
        const least = leastBars(lengths, 40, kerf);
        expect(layout.lowerBound).toBeLessThanOrEqual(least);
        expect(layout.newCost).toBe(least);
      }),
      { numRuns: 150, seed: 3 },
    );
  });

  it('is the same for the same problem, seed and number of steps', () => {
    const problem = barProblem({
      kerf: 1,
      parts: [part('A', 33, 9), part('B', 27, 7), part('C', 14, 11), part('D', 9, 5)],
    });
    expect(layOutBars(problem, { steps: 300, seed: 4 })).toEqual(
      layOutBars(problem, { steps: 300, seed: 4 }),
    );
  });
});

/** Fewest bars by trying every bar for every part. */
function leastBars(lengths: readonly number[], room: number, kerf: number): number {
  let best = lengths.length;
  const left: number[] = [];
  const place = (at: number): void => {
    if (left.length >= best) return;
    if (at === lengths.length) {
      best = left.length;
      return;
    }
    const need = (lengths[at] ?? 0) + kerf;
    for (let b = 0; b < left.length; b++) {
      const before = left[b] ?? 0;
      if (before < need) continue;
      left[b] = before - need;
      place(at + 1);
      left[b] = before;
    }
    left.push(room + kerf - need);
    place(at + 1);
    left.pop();
  };
  place(0);
  return best;
}

describe('bars', () => {
  it('proves the optimum where first-fit needs a bar more', () => {
    // Longest first gives 60 + 40, 50 + 30, 20 + … ; 60 + 20 + 20 and 50 + 50 and 40 + 30 + 30 need only three.
    const problem = barProblem({
      parts: [part('A', 60), part('B', 50, 2), part('C', 40), part('D', 30, 2), part('E', 20, 2)],
    });
    expect(layOutBars(problem)).toMatchObject({ newCost: 3, lowerBound: 3, isProved: true });
  });

  it('chooses the lengths that cost least together', () => {
    // Three parts of 40: a bar of 120 at 10, or three of 50 at 4 each.
    const stock = [bar('short', 50, null, 4), bar('long', 120, null, 10)];
    expect(layOutBars(barProblem({ stock, parts: [part('A', 40, 3)] }))).toMatchObject({
      newCost: 10,
      isProved: true,
    });
    const dearer = [bar('short', 50, null, 3), bar('long', 120, null, 10)];
    expect(layOutBars(barProblem({ stock: dearer, parts: [part('A', 40, 3)] }))).toMatchObject({
      newCost: 9,
      isProved: true,
    });
  });

  it("uses the buyer's own pieces first", () => {
    const stock = [bar('new', 100), bar('own', 45, 1, 0)];
    const layout = layOutBars(barProblem({ stock, parts: [part('A', 40, 3)] }));
    expect(layout.newCost).toBe(1);
    expect(layout.pieces.map((piece) => piece.stock)).toEqual(['own', 'new']);
  });

  it('cuts around defects, each of one bar', () => {
    const stock = [{ ...bar('knotty', 100, 1, 0), defects: [{ from: 40, to: 50 }] }];
    const problem = barProblem({ kerf: 2, stock, parts: [part('A', 40), part('B', 48)] });
    const layout = layOutBars(problem);
    expect(layout.unplaced).toEqual([]);
    expect(layout.pieces[0]?.placements).toMatchObject([
      { part: 'A', x: 0 },
      { part: 'B', x: 50 },
    ]);
    const longer = { ...problem, parts: [part('A', 40), part('B', 51)] };
    expect(layOutBars(longer).unplaced).toEqual([{ part: 'B', qty: 1, reason: 'PART_EXCEEDS_STOCK' }]);
  });

  it('takes the trim off both ends', () => {
    const problem = barProblem({ trim: { left: 5, right: 7 }, parts: [part('A', 88)] });
    const layout = layOutBars(problem);
    expect(layout.pieces[0]?.placements[0]?.x).toBe(5);
    expect(layout.pieces[0]?.cuts).toMatchObject([
      { edge: 'left', fence: 5 },
      { fence: 88, yields: ['2a', '2b'] },
    ]);
    expect(layOutBars({ ...problem, parts: [part('A', 89)] }).unplaced).toHaveLength(1);
  });

  it('says what is missing when the bars run out', () => {
    const problem = barProblem({ stock: [bar('last', 100, 1)], parts: [part('A', 60, 2)] });
    expect(layOutBars(problem, { steps: 200 }).unplaced).toEqual([
      { part: 'A', qty: 1, reason: 'STOCK_EXHAUSTED' },
    ]);
  });
});
