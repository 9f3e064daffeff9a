import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  findNearestStretch,
  findStretch,
  listGraduations,
  moveAlong,
  readableLimits,
  readableStretch,
  settleOn,
  tapeGraduationNm,
  type TapeLimits,
} from '#components/ui/tape-scale.ts';
import type { UnitSystem } from '#lib/units/length.ts';

const MM = 1_000_000;
const INCH = 25_400_000;

const unitsOf = fc.constantFrom<UnitSystem>('mm', 'in');
const length = fc.integer({ min: 0, max: 3000 * MM });
const limitsOf: fc.Arbitrary<TapeLimits> = fc
  .record({
    ends: fc.tuple(length, length),
    stretches: fc.array(fc.tuple(length, fc.integer({ min: 0, max: 300 * MM })), { maxLength: 4 }),
  })
  .map(({ ends, stretches }) => ({
    minNm: Math.min(...ends),
    maxNm: Math.max(...ends),
    excluded: stretches.map(([fromNm, long]) => ({
      fromNm,
      toNm: fromNm + long,
      reason: 'it does not hold.',
    })),
  }));

function isAllowed(nm: number, limits: TapeLimits): boolean {
  return nm >= limits.minNm && nm <= limits.maxNm && findStretch(nm, limits) === null;
}

function isOnBlade(nm: number, limits: TapeLimits, units: UnitSystem): boolean {
  return nm % tapeGraduationNm(units) === 0 || nm === limits.minNm || nm === limits.maxNm;
}

describe('moving along the tape', () => {
  it('always ends on an allowed graduation or limit, or stays where it was', () => {
    fc.assert(
      fc.property(
        limitsOf,
        length,
        fc.integer({ min: -40, max: 40 }),
        unitsOf,
        (limits, nm, count, units) => {
          const moved = moveAlong(nm, count, limits, units).nm;
          expect(moved === nm || (isAllowed(moved, limits) && isOnBlade(moved, limits, units))).toBe(true);
        },
      ),
    );
  });

  it('never goes against the direction asked for, from a length within the limits', () => {
    fc.assert(
      fc.property(limitsOf, fc.double({ min: 0, max: 1, noNaN: true }), unitsOf, (limits, share, units) => {
        const nm = Math.round(limits.minNm + share * (limits.maxNm - limits.minNm));
        expect(moveAlong(nm, 1, limits, units).nm).toBeGreaterThanOrEqual(nm);
        expect(moveAlong(nm, -1, limits, units).nm).toBeLessThanOrEqual(nm);
      }),
    );
  });

  it('leaps over stretches that touch in one go', () => {
    const limits = {
      minNm: 0,
      maxNm: 1000 * MM,
      excluded: [
        { fromNm: 101 * MM, toNm: 110 * MM, reason: 'first' },
        { fromNm: 110 * MM, toNm: 120.5 * MM, reason: 'second' },
      ],
    };
    expect(moveAlong(100 * MM, 1, limits, 'mm').nm).toBe(121 * MM);
    expect(moveAlong(121 * MM, -1, limits, 'mm').nm).toBe(100 * MM);
  });
});

describe('letting go of the tape', () => {
  it('always settles on an allowed graduation or limit, or leaves the value', () => {
    fc.assert(
      fc.property(limitsOf, length, length, unitsOf, (limits, nm, wanted, units) => {
        const settled = settleOn(nm, wanted, limits, units).nm;
        expect(settled === nm || (isAllowed(settled, limits) && isOnBlade(settled, limits, units))).toBe(
          true,
        );
      }),
    );
  });

  it('takes the nearest graduation: 36.03 in is nearest to 36, 36.04 in to 36 1/16', () => {
    const limits = { minNm: 0, maxNm: 48 * INCH, excluded: [] };
    expect(settleOn(0, 36.03 * INCH, limits, 'in').nm).toBe(36 * INCH);
    expect(settleOn(0, 36.04 * INCH, limits, 'in').nm).toBe(36 * INCH + INCH / 16);
  });
});

describe('what the tape writes', () => {
  it('writes no limit that it would refuse, and loses less than its finest reading', () => {
    fc.assert(
      fc.property(limitsOf, unitsOf, (limits, units) => {
        const readable = readableLimits(limits, units);
        expect(readable.minNm).toBeGreaterThanOrEqual(limits.minNm);
        expect(readable.maxNm).toBeLessThanOrEqual(limits.maxNm);
        expect(readable.minNm - limits.minNm).toBeLessThan(units === 'in' ? 396_875 : 100_000);
      }),
    );
  });

  it('keeps the ends of a stretch that is narrower than a reading', () => {
    const stretch = { fromNm: 600.02 * MM, toNm: 600.03 * MM, reason: 'it does not hold.' };
    expect(readableStretch(stretch, 'mm')).toEqual(stretch);
  });

  it('finds the stretch nearest to a length, inside and on either side', () => {
    const near = { fromNm: 10, toNm: 20, reason: 'near' };
    const far = { fromNm: 100, toNm: 110, reason: 'far' };
    const limits = { minNm: 0, maxNm: 200, excluded: [far, near] };
    expect([0, 15, 59, 61, 200].map((nm) => findNearestStretch(nm, limits)?.reason)).toEqual([
      'near',
      'near',
      'near',
      'far',
      'far',
    ]);
    expect(findNearestStretch(5, { ...limits, excluded: [] })).toBeNull();
  });
});

describe('the lines of the blade', () => {
  it('divides an inch into sixteenths, the longer the line the coarser its division', () => {
    const lines = listGraduations(17 * INCH, 18 * INCH, 'in');
    expect(lines).toHaveLength(17);
    expect(lines.filter(({ figure }) => figure !== '').map(({ figure }) => figure)).toEqual(['17', '18']);
    const reach = lines.map((line) => line.reach);
    // Whole, half, quarter, eighth and sixteenth each shorter than the one before.
    const [whole = 0, sixteenth = 0, eighth = 0, , quarter = 0, , , , half = 0] = reach;
    expect([whole, half, quarter, eighth, sixteenth]).toEqual(
      [whole, half, quarter, eighth, sixteenth].sort((a, b) => b - a),
    );
    expect(new Set([whole, half, quarter, eighth, sixteenth]).size).toBe(5);
  });

  it('puts centimetre figures on a metric blade, a line at each millimetre', () => {
    const lines = listGraduations(1_000_000_000, 1_020_000_000, 'mm');
    expect(lines).toHaveLength(21);
    expect(lines.filter(({ figure }) => figure !== '').map(({ nm, figure }) => [nm / MM, figure])).toEqual([
      [1000, '100'],
      [1010, '101'],
      [1020, '102'],
    ]);
  });
});
