/**
 * Lengths are plain numbers holding whole nanometres. The inch is 25.4 mm by definition (international yard and pound
 * agreement of 1959), so 1/64 in = 396 875 nm and 0.01 mm = 10 000 nm are both whole, and switching units never drifts.
 */

/** The reader's system of units. */
export type UnitSystem = 'mm' | 'in';

/** Units that a length may be written in. */
export type LengthUnit = 'mm' | 'cm' | 'm' | 'in' | 'ft';

export const NM_PER_MM = 1_000_000;
export const NM_PER_INCH = 25_400_000;
export const NM_PER_FOOT = 304_800_000;
/** One sixty-fourth of an inch, the finest graduation of a bench rule. */
export const NM_PER_64TH = 396_875;

/** Nanometres in one of each unit, exact. */
export const NM_PER_UNIT: Readonly<Record<LengthUnit, number>> = {
  mm: NM_PER_MM,
  cm: 10_000_000,
  m: 1_000_000_000,
  in: NM_PER_INCH,
  ft: NM_PER_FOOT,
};

/** The longest length that Benchleaf works with: 1 km, in nanometres. */
export const MAX_LENGTH_NM = 1_000_000_000_000;

/** Kilograms in one avoirdupois pound, exact by definition. */
export const KG_PER_POUND = 0.45359237;

/**
 * Rounds to the nearest whole nanometre, halves away from zero, so that a length and its mirror image stay alike.
 * Never gives −0.
 */
export function roundNm(nm: number): number {
  const rounded = nm < 0 ? -Math.round(-nm) : Math.round(nm);
  return rounded === 0 ? 0 : rounded;
}

/** Nanometres as millimetres (a plain number, for drawing and machines, not for printing). */
export function toMillimetres(nm: number): number {
  return nm / NM_PER_MM;
}

/** Millimetres as whole nanometres. */
export function fromMillimetres(mm: number): number {
  return roundNm(mm * NM_PER_MM);
}

/** Nanometres as inches (a plain number, for drawing and machines, not for printing). */
export function toInches(nm: number): number {
  return nm / NM_PER_INCH;
}

/** Inches as whole nanometres. */
export function fromInches(inches: number): number {
  return roundNm(inches * NM_PER_INCH);
}
