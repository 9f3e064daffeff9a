import { formatLength } from '#lib/units/format-length.ts';
import {
  formatAngle,
  formatArea,
  formatMass,
  formatNumber,
  formatVolume,
  NM2_PER_M2,
  NM3_PER_M3,
} from '#lib/units/format-measure.ts';
import type { UnitSystem } from '#lib/units/length.ts';

import type { Kind, Value } from './types.ts';

/** A value as it is printed in running text, in the reader's units. Lists are printed with commas between. */
export function printValue(kind: Kind, value: Value, units: UnitSystem): string {
  if (typeof value === 'string') return value;
  if (typeof value === 'boolean') return value ? 'yes' : 'no';
  if (typeof value !== 'number') {
    const inner = typeof kind === 'string' || kind.list === 'any' ? 'number' : kind.list;
    return value.map((each) => printValue(inner, each, units)).join(', ');
  }
  if (!Number.isFinite(value)) return '?';
  switch (kind) {
    case 'length':
      return formatLength(value, { units }).text;
    case 'area':
      return formatArea(value / NM2_PER_M2, units);
    case 'volume':
      return formatVolume(value / NM3_PER_M3, units);
    case 'mass':
      return formatMass(value, units);
    case 'angle':
      return formatAngle(value);
    default:
      return formatNumber(value);
  }
}
