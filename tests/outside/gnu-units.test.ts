import { execFileSync } from 'node:child_process';

import { describe, expect, it } from 'vitest';

import { compilePlan } from '#lib/plan/compile.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import { formatArea, formatMass, formatRun, formatVolume } from '#lib/units/format-measure.ts';
import { parseLength } from '#lib/units/parse-length.ts';

/**
 * Conversions against GNU Units (https://www.gnu.org/software/units/), whose definitions file cites the legal definitions of
 * each unit. The program is asked with 15 digits, one conversion a line.
 */
function convert(from: string, to: string): number {
  const out = execFileSync('units', ['-t', '-o', '%.15g', from, to], { encoding: 'utf8' });
  return Number(out.trim());
}

describe('lengths against GNU Units', () => {
  it.each([
    ['1/64 in', '1|64 inch'],
    ['17 3/4 in', '17.75 inch'],
    ['3/16"', '3|16 inch'],
    ["5'", '5 foot'],
    ['1\' 5 3/4"', '1 foot + 5.75 inch'],
    ['46.5 cm', '46.5 cm'],
    ['0.01 mm', '0.01 mm'],
    ['2.44 m', '2.44 m'],
    ['⅞ in', '7|8 inch'],
  ])('%s', (written, asked) => {
    const read = parseLength(written, 'mm');
    if (!read.ok) throw new Error(read.message);
    expect(read.nm).toBe(convert(asked, 'nm'));
  });

  it('rounds what is not whole to the nearest nanometre', () => {
    const read = parseLength('1/3 in', 'mm');
    expect(read).toEqual({ ok: true, nm: Math.round(convert('1|3 inch', 'nm')) });
  });
});

describe('unit constants of the plan language against GNU Units', () => {
  it.each([
    ['mm', 'mm', 'nm'],
    ['cm', 'cm', 'nm'],
    ['m', 'm', 'nm'],
    ['inch', 'inch', 'nm'],
    ['foot', 'foot', 'nm'],
    ['deg', 'degree', 'degree'],
    ['kg', 'kg', 'kg'],
    ['lb', 'lb', 'kg'],
  ])('1*%s', (name, unit, kept) => {
    const { plan } = compilePlan(
      `---\ntitle: T\nsummary: S\nskill: 1\nhours: [1, 2]\n---\n\n<Let name="x" value={1*${name}} />\n`,
    );
    if (!plan) throw new Error('The plan must compile.');
    expect(resolvePlan(plan, { values: {}, measured: {}, units: 'mm' }).values[0]?.value).toBe(
      convert(unit, kept),
    );
  });
});

describe('printed measures against GNU Units', () => {
  it('areas, volumes, masses and runs', () => {
    expect(formatArea(1, 'in')).toBe(`${convert('1 m^2', 'ft^2').toFixed(2)} sq ft`);
    expect(formatVolume(1, 'in')).toBe(`${convert('1 m^3', 'ft^3').toFixed(2)} cu ft`);
    expect(formatMass(10, 'in')).toBe(`${convert('10 kg', 'lb').toFixed(0)} lb`);
    expect(formatRun(1, 'in')).toBe(`${convert('1 m', 'ft').toFixed(2)} ft`);
  });
});
