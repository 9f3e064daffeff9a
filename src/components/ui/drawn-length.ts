import type { FormattedLength } from '#lib/units/format-length.ts';

/** The pieces in which a length is drawn on a page, left to right; empty ones are left out of the drawing. */
export interface DrawnLength {
  /** What is read out and copied. */
  plain: string;
  /** Minus sign and feet, then the whole number; empty for a bare fraction such as 3/4. */
  lead: string;
  fraction: { over: number; under: number } | null;
  /** The digits behind the point, in millimetres. */
  decimals: string;
  /** `+` or `−` where the reading alone would mislead. */
  mark: string;
  /** The unit behind the figure: `mm`, or the inch mark. */
  unit: string;
}

/** Takes a formatted length apart for drawing. */
export function drawLength(length: FormattedLength): DrawnLength {
  const sign = length.sign < 0 ? '−' : '';
  const feet = length.feet === undefined ? '' : `${String(length.feet)}′ `;
  const hasFraction = length.numerator !== 0;
  if (length.units === 'mm') {
    const tenths = hasFraction ? String(Math.round((length.numerator / length.denominator) * 10)) : '';
    return {
      plain: length.text,
      lead: `${sign}${String(length.whole)}`,
      fraction: null,
      decimals: tenths,
      mark: length.mark,
      unit: 'mm',
    };
  }
  const isBareFeet = length.feet !== undefined && length.whole === 0 && !hasFraction && length.mark === '';
  const whole = (hasFraction && length.whole === 0) || isBareFeet ? '' : String(length.whole);
  return {
    plain: length.text,
    lead: `${sign}${feet}${whole}`.trim(),
    fraction: hasFraction ? { over: length.numerator, under: length.denominator } : null,
    decimals: '',
    mark: length.mark,
    unit: isBareFeet ? '' : '″',
  };
}
