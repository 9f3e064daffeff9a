import fc from 'fast-check';
import { describe, expect, it } from 'vitest';

import { formatExactLength, formatLength } from '#lib/units/format-length.ts';
import { parseLength } from '#lib/units/parse-length.ts';

const INCH = 25_400_000;
const MM = 1_000_000;

describe('reading a length', () => {
  it.each<[string, 'mm' | 'in' | 'cm', number]>([
    ['17 3/4', 'in', 17.75 * INCH],
    ['17-3/4"', 'mm', 17.75 * INCH],
    ['17 3/4 in', 'mm', 17.75 * INCH],
    ['17 3/4 inches', 'mm', 17.75 * INCH],
    ['17¾', 'in', 17.75 * INCH],
    ['17 ¾″', 'mm', 17.75 * INCH],
    ['⅛"', 'mm', INCH / 8],
    ['3⁄4 in.', 'mm', 0.75 * INCH],
    ['1\' 5 3/4"', 'mm', 17.75 * INCH],
    ['1′ 5¾″', 'mm', 17.75 * INCH],
    ['1\'-5 3/4"', 'mm', 17.75 * INCH],
    ["1' 5 3/4", 'mm', 17.75 * INCH],
    ['1 ft 5 3/4 in', 'mm', 17.75 * INCH],
    ['1 foot 5 inches', 'mm', 17 * INCH],
    ["2'", 'mm', 24 * INCH],
    ['2 feet', 'mm', 24 * INCH],
    ['450', 'mm', 450 * MM],
    ['450', 'in', 450 * INCH],
    ['450mm', 'in', 450 * MM],
    ['46.5 cm', 'in', 465 * MM],
    ['0.45 m', 'in', 450 * MM],
    ['.5 in', 'mm', 0.5 * INCH],
    ['  12.34567 mm ', 'in', 12_345_670],
    ['1/64 in', 'mm', 396_875],
    ['1/3 in', 'mm', 8_466_667],
    ['−3 mm', 'in', -3 * MM],
    ['-1 1/2"', 'mm', -1.5 * INCH],
    ['0', 'mm', 0],
    ['450 MM', 'in', 450 * MM],
  ])('reads %s with the default unit %s', (text, unit, nm) => {
    expect(parseLength(text, unit)).toEqual({ ok: true, nm });
  });

  const examples = 'Write it as 450 mm, 45 cm, 17 3/4 in, 17-3/4" or 1\' 5 3/4".';
  it.each([
    [
      '46,5 cm',
      'A comma is not read, because it means thousands to some and decimals to others.',
      'Write a decimal point, 46.5 cm, or leave the comma out, 465 cm.',
    ],
    ['', 'A length is missing.', examples],
    ['   ', 'A length is missing.', examples],
    ['4 ells', '“ells” is not a unit of length.', 'Use mm, cm, m, in or ft.'],
    ['1/0 in', 'The denominator is zero.', 'Write it as 3/4.'],
    ['1/ in', 'The fraction has no denominator.', 'Write it as 3/4.'],
    ['1.5/2 in', 'A fraction is written with whole numbers.', 'Write it as 3/4.'],
    ['1.5 3/4 in', 'A decimal and a fraction cannot be mixed.', 'Write it as 17.75 or 17 3/4.'],
    ['3 4', 'The number cannot be read.', examples],
    ['1 m 20 cm', 'There is something after the unit.', examples],
    ['1 m cm', 'There are two units.', examples],
    ["1' 5 mm", 'Feet are followed by inches only.', 'Write it as 1\' 5 3/4".'],
    ['mm', 'A number is missing.', examples],
    ['2 km', '“km” is not a unit of length.', 'Use mm, cm, m, in or ft.'],
    ['1001 m', 'That is longer than 1 km.', 'Check the unit.'],
    ['9999999999999999999 mm', 'The number has too many digits.', examples],
    ['1e3 mm', '“e” is not a unit of length.', 'Use mm, cm, m, in or ft.'],
    ['constructor', '“constructor” is not a unit of length.', 'Use mm, cm, m, in or ft.'],
  ])('refuses %s with a sentence and a cure', (text, message, hint) => {
    expect(parseLength(text, 'mm')).toEqual({ ok: false, message, hint });
  });

  it('refuses a hundred kilobytes of near-matches of every sort', () => {
    for (const piece of ['1', ' ', '1/', '1 3/4', "1' ", '¾', '-', '.', '1.', 'in ', '1 3/4" ']) {
      expect(parseLength(piece.repeat(100_000 / piece.length), 'mm')).toEqual({
        ok: false,
        message: 'That is too long to be a length.',
        hint: examples,
      });
    }
  });

  const lengths = fc.integer({ min: -1_000_000_000_000, max: 1_000_000_000_000 });

  it('gives back exactly what was printed for a field, in either system', () => {
    fc.assert(
      fc.property(lengths, fc.constantFrom('mm' as const, 'in' as const), (nm, units) => {
        expect(parseLength(formatExactLength(nm, units), 'mm')).toEqual({ ok: true, nm });
      }),
    );
  });

  it('does not drift over a hundred switches of units', () => {
    fc.assert(
      fc.property(lengths, (nm) => {
        let now = nm;
        for (let turn = 0; turn < 100; turn += 1) {
          const read = parseLength(formatExactLength(now, turn % 2 === 0 ? 'in' : 'mm'), 'mm');
          if (!read.ok) throw new Error(read.message);
          now = read.nm;
        }
        expect(now).toBe(nm);
      }),
      { numRuns: 30 },
    );
  });

  it('reads every whole sixty-fourth back as printed, with feet and without', () => {
    fc.assert(
      fc.property(fc.integer({ min: -64 * 12 * 100, max: 64 * 12 * 100 }), fc.boolean(), (count, feet) => {
        const nm = count * 396_875;
        const { text, marked } = formatLength(nm, { units: 'in', denominator: 64, feet });
        expect(marked).toBe(false);
        expect(parseLength(text, 'mm')).toEqual({ ok: true, nm: nm === 0 ? 0 : nm });
      }),
    );
  });
});
