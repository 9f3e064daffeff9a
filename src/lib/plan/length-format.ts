import type { LengthFormat } from '#lib/units/format-length.ts';
import type { UnitSystem } from '#lib/units/length.ts';

/**
 * How the shop reads lengths on our pages, as in our books: thirty-seconds of an inch, tenths of a millimetre. A part table sets all its lengths by
 * `formatAlike` with this, so that parts that must match read alike.
 */
export function lengthFormat(units: UnitSystem): LengthFormat {
  return units === 'in' ? { units, denominator: 32 } : { units, decimals: 0.1 };
}
