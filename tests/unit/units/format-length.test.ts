import fc from 'fast-check';
import { describe, expect, it } from 'vitest';

import {
  formatAlike,
  formatExactLength,
  formatLength,
  graduationNm,
  readsAs,
} from '#lib/units/format-length.ts';
import type { LengthFormat } from '#lib/units/format-length.ts';
import { fromInches, fromMillimetres, roundNm, toInches, toMillimetres } from '#lib/units/length.ts';

const INCH = 25_400_000;
const MM = 1_000_000;

describe('printing a length', () => {
  it.each<[number, LengthFormat, string]>([
    [17.75 * INCH, { units: 'in' }, '17 3/4"'],
    [17.75 * INCH, { units: 'in', feet: true }, '1\' 5 3/4"'],
    [24 * INCH, { units: 'in', feet: true }, "2'"],
    [0.75 * INCH, { units: 'in', feet: true }, '3/4"'],
    [12.5 * INCH, { units: 'in', feet: true }, '1\' 1/2"'],
    [0, { units: 'in' }, '0"'],
    [-0.75 * INCH, { units: 'in' }, '−3/4"'],
    [451 * MM, { units: 'mm' }, '451 mm'],
    [342_666_667, { units: 'mm' }, '342.7 mm'],
    [342_666_667, { units: 'mm', decimals: 1 }, '343− mm'],
    [342_300_000, { units: 'mm', decimals: 1 }, '342+ mm'],
    [342_666_667, { units: 'mm', decimals: 0.5 }, '342.5+ mm'],
    [17_600_000, { units: 'mm' }, '17.6 mm'],
    [-12 * MM, { units: 'mm' }, '−12 mm'],
    [-12_300_000, { units: 'mm', decimals: 1 }, '−12+ mm'],
    [-10_000, { units: 'mm' }, '0 mm'],
    // 18 mm = 0.708661 in: nearest 32nd 23/32 = 0.71875, short of it by 0.0101 in, more than 1/128.
    [18 * MM, { units: 'in', denominator: 32 }, '23/32−"'],
    // nearest 64th 45/64 = 0.703125, over it by 0.0055 in, more than 1/256.
    [18 * MM, { units: 'in', denominator: 64 }, '45/64+"'],
    [17.5 * INCH, { units: 'in', denominator: 2 }, '17 1/2"'],
    [17.75 * INCH, { units: 'in', denominator: 2 }, '18−"'],
  ])('prints %d nm with %o as %s', (nm, format, text) => {
    expect(formatLength(nm, format).text).toBe(text);
  });

  it('gives the parts that a drawing sets as a real fraction', () => {
    expect(formatLength(-(5 * 12 + 3.625) * INCH, { units: 'in', feet: true })).toEqual({
      text: '−5\' 3 5/8"',
      units: 'in',
      sign: -1,
      feet: 5,
      whole: 3,
      numerator: 5,
      denominator: 8,
      remainderNm: 0,
      marked: false,
      mark: '',
    });
    expect(formatLength(17_600_000, { units: 'mm' })).toMatchObject({
      whole: 17,
      numerator: 3,
      denominator: 5,
    });
  });

  it('says exactly what was rounded away', () => {
    expect(formatLength(342_666_667, { units: 'mm', decimals: 1 }).remainderNm).toBe(-333_333);
  });

  it('refuses a length that is not finite', () => {
    expect(() => formatLength(Number.NaN, { units: 'mm' })).toThrow('A length must be finite, not NaN.');
  });

  const formats = fc.oneof(
    fc
      .constantFrom(2, 4, 8, 16, 32, 64)
      .map((denominator): LengthFormat => ({ units: 'in', denominator: denominator as 2 })),
    fc.constantFrom(1, 0.5, 0.1).map((decimals): LengthFormat => ({ units: 'mm', decimals: decimals as 1 })),
  );
  const lengths = fc.integer({ min: -100_000_000_000, max: 100_000_000_000 });

  it('is never further off than half a graduation, and marks more than a quarter', () => {
    fc.assert(
      fc.property(lengths, formats, (nm, format) => {
        const { remainderNm, marked } = formatLength(nm, format);
        const graduation = graduationNm(format);
        expect(Math.abs(remainderNm) * 2).toBeLessThanOrEqual(graduation);
        expect(marked).toBe(Math.abs(remainderNm) * 4 > graduation && Math.abs(remainderNm) > 50_000);
        expect(readsAs(nm, format) + remainderNm).toBe(nm);
      }),
    );
  });

  it('prints a length and its mirror image alike but for the sign', () => {
    fc.assert(
      fc.property(lengths, formats, (nm, format) => {
        const [plus, minus] = [formatLength(Math.abs(nm), format), formatLength(-Math.abs(nm), format)];
        expect(minus.text.replace(/^−/, '')).toBe(plus.text);
      }),
    );
  });

  it('prints lengths that must match alike across a rounding boundary', () => {
    const format: LengthFormat = { units: 'mm', decimals: 1 };
    const [a, b, far] = [451_499_990, 451_500_010, 452_000_000];
    expect(formatLength(a, format).text).not.toBe(formatLength(b, format).text);
    const shown = formatAlike([b, far, a], format).map((length) => length.text);
    expect(shown).toEqual(['451+ mm', '452 mm', '451+ mm']);
  });

  it('prints lengths alike however they are ordered', () => {
    fc.assert(
      fc.property(fc.array(lengths, { minLength: 1, maxLength: 20 }), formats, (list, format) => {
        const forwards = formatAlike(list, format).map((length) => length.text);
        const backwards = formatAlike([...list].reverse(), format).map((length) => length.text);
        expect(backwards.reverse()).toEqual(forwards);
      }),
    );
  });

  it('writes exact lengths without noise', () => {
    expect(formatExactLength(342_666_667, 'mm')).toBe('342.666667 mm');
    expect(formatExactLength(-450_000_000, 'mm')).toBe('-450 mm');
    expect(formatExactLength(17.75 * INCH, 'in')).toBe('17 3/4"');
    expect(formatExactLength(450_000_000, 'in')).toBe('17.716535433"');
  });
});

describe('whole nanometres', () => {
  it('round halves away from zero and never give a negative zero', () => {
    expect([0.5, -0.5, 1.4, -1.4, -0.2].map(roundNm)).toEqual([1, -1, 1, -1, 0]);
    expect(Object.is(roundNm(-0.2), 0)).toBe(true);
  });

  it('convert exactly', () => {
    expect(fromInches(1 / 64)).toBe(396_875);
    expect(fromMillimetres(0.01)).toBe(10_000);
    expect(toInches(fromInches(17.75))).toBe(17.75);
    expect(toMillimetres(12_345_678)).toBe(12.345678);
  });
});
