import { describe, expect, it } from 'vitest';

import {
  formatAngle,
  formatArea,
  formatMass,
  formatNumber,
  formatRun,
  formatVolume,
} from '#lib/units/format-measure.ts';
import { parseAngle } from '#lib/units/parse-angle.ts';

describe('printing measures', () => {
  it('prints areas, volumes, masses and runs in the reader’s units', () => {
    // 1 sq ft = 0.09290304 m², 1 cu ft = 0.028316846592 m³, 1 lb = 0.45359237 kg, 1 ft = 0.3048 m, all exact by definition.
    expect([formatArea(2.9768, 'mm'), formatArea(0.9290304, 'in')]).toEqual(['2.98 m²', '10 sq ft']);
    expect([formatVolume(0.01976, 'mm'), formatVolume(0.28316846592, 'in')]).toEqual([
      '0.0198 m³',
      '10 cu ft',
    ]);
    expect([formatMass(12.34, 'mm'), formatMass(4.5359237, 'in')]).toEqual(['12.3 kg', '10 lb']);
    expect([formatRun(2.4, 'mm'), formatRun(3.048, 'in')]).toEqual(['2.4 m', '10 ft']);
    expect(formatAngle(22.5)).toBe('22.5°');
  });

  it('rounds decimal halves as they are written, and writes a true minus', () => {
    expect([formatNumber(1.005, 2), formatNumber(-2.5, 0), formatNumber(-0.0001), formatNumber(3)]).toEqual([
      '1.01',
      '−3',
      '0',
      '3',
    ]);
  });

  it('prints very small and very large numbers without exponents where it can', () => {
    expect([formatNumber(1e-9), formatNumber(1e20, 0)]).toEqual(['0', '100000000000000000000']);
  });

  it('lets no number through that is not finite', () => {
    expect(() => formatNumber(Number.POSITIVE_INFINITY)).toThrow('A number must be finite, not Infinity.');
  });
});

describe('reading an angle', () => {
  it.each([
    ['45', 45],
    ['22.5°', 22.5],
    ['22.5 deg', 22.5],
    ['-3 degrees', -3],
    ['−90°', -90],
  ])('reads %s', (text, degrees) => {
    expect(parseAngle(text)).toEqual({ ok: true, degrees });
  });

  it.each([
    ['45,5', 'A comma is not read.', 'Write a decimal point: 45.5.'],
    ['1 rad', 'The angle cannot be read.', 'Write it as 22.5°.'],
    ['361', 'That is more than a full turn.', 'Write it as 22.5°.'],
    ['1'.repeat(100_000), 'That is too long to be an angle.', 'Write it as 22.5°.'],
  ])('refuses %.20s', (text, message, hint) => {
    expect(parseAngle(text)).toEqual({ ok: false, message, hint });
  });
});
