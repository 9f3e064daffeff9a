import type { LengthFormat } from '#lib/units/format-length.ts';
import type { UnitSystem } from '#lib/units/length.ts';

/**
 * How the shop reads lengths on our pages and in our books: sixteenths on a tape are not fine enough for a parts table, so thirty-seconds;
 * metric to half a millimetre.
 */
export function lengthFormat(units: UnitSystem): LengthFormat {
  return units === 'in' ? { units, denominator: 32 } : { units, decimals: 0.5 };
}
