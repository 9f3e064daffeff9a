import { NM_PER_INCH, NM_PER_MM, roundNm } from './length.ts';
import type { UnitSystem } from './length.ts';

/** Graduations of an inch rule. */
export type Denominator = 2 | 4 | 8 | 16 | 32 | 64;

/** Graduations of a metric reading, in millimetres. */
export type MetricStep = 1 | 0.5 | 0.1;

export interface LengthFormat {
  units: UnitSystem;
  /** Finest fraction of an inch; 1/32 when left out. */
  denominator?: Denominator;
  /** Finest step of a metric reading in mm; 0.1 when left out. */
  decimals?: MetricStep;
  /** Feet and inches from one foot up. */
  feet?: boolean;
}

/**
 * A length as it is read off a rule. `text` is complete plain text; the other fields let a page or a drawing set real
 * fractions. In mm, `whole` is whole millimetres and `numerator/denominator` the tenths or the half (0/1 when none).
 */
export interface FormattedLength {
  text: string;
  units: UnitSystem;
  /** −1 for a negative reading, else 1; the other fields hold the magnitude. */
  sign: 1 | -1;
  /** Whole feet, only when feet were asked for and there are any. */
  feet?: number;
  whole: number;
  numerator: number;
  denominator: number;
  /** The length less its reading, in nanometres: what was rounded away. */
  remainderNm: number;
  /** True when the remainder is more than a quarter of a graduation (and than 0.05 mm): the reading alone would mislead. */
  marked: boolean;
  /** `+` when the length is a little more than its reading (full), `−` when a little less (scant), else empty. */
  mark: '' | '+' | '−';
}

/** The sentence that explains the mark wherever marked lengths are printed. */
export const REMAINDER_LEGEND =
  'A + after a number means a little more than it says, a − a little less: more than a quarter of the finest division.';

const DEFAULT_DENOMINATOR: Denominator = 32;
const DEFAULT_METRIC_STEP: MetricStep = 0.1;
const MINUS = '−';
/** A twentieth of a millimetre: finer than a saw, a pencil or a tape can tell, so no mark is owed for less. */
const LEAST_MARKED_NM = 50_000;

/** The size of one graduation in nanometres. */
export function graduationNm(format: LengthFormat): number {
  return format.units === 'in'
    ? NM_PER_INCH / (format.denominator ?? DEFAULT_DENOMINATOR)
    : Math.round((format.decimals ?? DEFAULT_METRIC_STEP) * NM_PER_MM);
}

function divideByCommon(numerator: number, denominator: number): [number, number] {
  let a = numerator;
  let b = denominator;
  while (b !== 0) [a, b] = [b, a % b];
  return a === 0 ? [0, 1] : [numerator / a, denominator / a];
}

/**
 * Reads a length to the nearest graduation (halves away from zero) in the reader's units: `17 3/4"`, `1' 5 3/4"`, `451 mm`,
 * `342.7 mm`. When what was rounded away exceeds a quarter of a graduation the number carries a mark: `343− mm`, `17 3/4+"`.
 *
 * @param nm length in nanometres; rounded to whole nanometres first. Not finite throws a RangeError.
 */
export function formatLength(nm: number, format: LengthFormat): FormattedLength {
  if (!Number.isFinite(nm)) throw new RangeError(`A length must be finite, not ${nm}.`);
  const exact = roundNm(nm);
  const graduation = graduationNm(format);
  const steps = Math.round(Math.abs(exact) / graduation);
  const reading = steps * graduation;
  const sign = exact < 0 && steps > 0 ? -1 : 1;
  const remainderNm = exact - (exact < 0 ? -reading : reading) || 0;
  const marked = Math.abs(remainderNm) > Math.max(graduation / 4, LEAST_MARKED_NM);
  // A negative length that is a little more than it reads is further from zero: full, too.
  const isFull = exact < 0 ? remainderNm < 0 : remainderNm > 0;
  const mark = marked ? (isFull ? '+' : '−') : '';
  const lead = sign < 0 ? MINUS : '';

  if (format.units === 'mm') {
    const perMm = Math.round(NM_PER_MM / graduation);
    const whole = Math.floor(steps / perMm);
    const [numerator, denominator] = divideByCommon(steps % perMm, perMm);
    const tenths = numerator === 0 ? '' : `.${Math.round((numerator / denominator) * 10)}`;
    const text = `${lead}${whole}${tenths}${mark} mm`;
    return { text, units: 'mm', sign, whole, numerator, denominator, remainderNm, marked, mark };
  }

  const perInch = Math.round(NM_PER_INCH / graduation);
  const inches = Math.floor(steps / perInch);
  const [numerator, denominator] = divideByCommon(steps % perInch, perInch);
  const feet = format.feet ? Math.floor(inches / 12) : 0;
  const whole = inches - feet * 12;
  const fraction = numerator === 0 ? '' : `${numerator}/${denominator}`;
  const isBare = whole === 0 && fraction === '';
  const inchText = whole === 0 && fraction !== '' ? fraction : `${whole}${fraction && ` ${fraction}`}`;
  const text =
    feet > 0 && isBare && mark === ''
      ? `${lead}${feet}'`
      : `${lead}${feet > 0 ? `${feet}' ` : ''}${inchText}${mark}"`;
  const formatted: FormattedLength = {
    text,
    units: 'in',
    sign,
    whole,
    numerator,
    denominator,
    remainderNm,
    marked,
    mark,
  };
  if (feet > 0) formatted.feet = feet;
  return formatted;
}

/** The length that the printed reading stands for: the nearest graduation, in nanometres. */
export function readsAs(nm: number, format: LengthFormat): number {
  return roundNm(nm) - formatLength(nm, format).remainderNm;
}

/**
 * Prints lengths that must match alike. Lengths within a fiftieth of a graduation of each other are one length to a
 * maker, yet a boundary may lie between them (451.4999 mm and 451.5 mm); each such group is printed from its smallest
 * member, mark and all. Unlike lengths are read each for itself. Order and number are kept.
 */
export function formatAlike(lengths: readonly number[], format: LengthFormat): FormattedLength[] {
  const tolerance = graduationNm(format) / 50;
  const order = lengths.map((_, index) => index).sort((a, b) => (lengths[a] ?? 0) - (lengths[b] ?? 0));
  const shown: FormattedLength[] = [];
  let lead: { nm: number; formatted: FormattedLength } | undefined;
  for (const index of order) {
    const nm = lengths[index] ?? 0;
    // A group reaches from its smallest member only, so that a long row of near lengths does not creep.
    if (lead === undefined || nm - lead.nm > tolerance) lead = { nm, formatted: formatLength(nm, format) };
    shown[index] = lead.formatted;
  }
  return shown;
}

/** Drops the zeros behind a decimal. */
function trimZeros(text: string): string {
  return text.includes('.') ? text.replace(/0+$/, '').replace(/\.$/, '') : text;
}

/**
 * A length written so that `parseLength` gives back exactly the same nanometres: for input fields and files. A fraction
 * of an inch where the length is a whole number of 64ths, else decimals as far as the nanometre needs.
 */
export function formatExactLength(nm: number, units: UnitSystem): string {
  const exact = roundNm(nm);
  if (units === 'mm') {
    const sign = exact < 0 ? '-' : '';
    const whole = Math.floor(Math.abs(exact) / NM_PER_MM);
    const rest = String(Math.abs(exact) % NM_PER_MM).padStart(6, '0');
    return `${sign}${trimZeros(`${whole}.${rest}`)} mm`;
  }
  const shown = formatLength(exact, { units: 'in', denominator: 64 });
  if (shown.remainderNm === 0) return shown.text.replace(MINUS, '-');
  // Nine decimals of an inch are 0.0254 nm, so the nearest nanometre is unmistakable.
  return `${trimZeros((exact / NM_PER_INCH).toFixed(9))}"`;
}
