import { KG_PER_POUND, NM_PER_FOOT } from './length.ts';
import type { UnitSystem } from './length.ts';

/** Square nanometres in a square metre, and cubic nanometres in a cubic metre. */
export const NM2_PER_M2 = 1e18;
export const NM3_PER_M3 = 1e27;

const M2_PER_SQUARE_FOOT = 0.09290304;
const M3_PER_CUBIC_FOOT = 0.028316846592;

/**
 * A number with at most `decimals` places, trailing zeros dropped, rounded half away from zero; a true minus sign.
 * Not finite throws a RangeError, because no such number may reach a page.
 */
export function formatNumber(value: number, decimals = 3): string {
  if (!Number.isFinite(value)) throw new RangeError(`A number must be finite, not ${value}.`);
  // Scaling through the shortest decimal text keeps 1.005 from being printed as 1 with two places.
  const size = Math.abs(value);
  const scaled = size < 1e15 ? Number(`${Math.round(Number(`${size}e${decimals}`))}e-${decimals}`) : size;
  const rounded = Number.isNaN(scaled) ? 0 : scaled;
  const text = rounded >= 1e21 ? rounded.toExponential(3) : rounded.toFixed(decimals);
  const trimmed = decimals > 0 && text.includes('.') ? text.replace(/0+$/, '').replace(/\.$/, '') : text;
  return value < 0 && Number(trimmed) !== 0 ? `−${trimmed}` : trimmed;
}

/** An area in m² or sq ft, two decimals. @param m2 square metres */
export function formatArea(m2: number, units: UnitSystem): string {
  return units === 'mm' ? `${formatNumber(m2, 2)} m²` : `${formatNumber(m2 / M2_PER_SQUARE_FOOT, 2)} sq ft`;
}

/** A volume in m³ (four decimals) or cu ft (two). @param m3 cubic metres */
export function formatVolume(m3: number, units: UnitSystem): string {
  return units === 'mm' ? `${formatNumber(m3, 4)} m³` : `${formatNumber(m3 / M3_PER_CUBIC_FOOT, 2)} cu ft`;
}

/** A mass in kg or lb, one decimal. @param kg kilograms */
export function formatMass(kg: number, units: UnitSystem): string {
  return units === 'mm' ? `${formatNumber(kg, 1)} kg` : `${formatNumber(kg / KG_PER_POUND, 1)} lb`;
}

/** An angle in degrees, two decimals, alike in both systems. */
export function formatAngle(degrees: number): string {
  return `${formatNumber(degrees, 2)}°`;
}

/** A run of material (bars, boards, edging) in m or ft, two decimals. @param metres metres */
export function formatRun(metres: number, units: UnitSystem): string {
  return units === 'mm'
    ? `${formatNumber(metres, 2)} m`
    : `${formatNumber((metres * 1e9) / NM_PER_FOOT, 2)} ft`;
}
