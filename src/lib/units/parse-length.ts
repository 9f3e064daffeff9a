import { MAX_LENGTH_NM, NM_PER_UNIT } from './length.ts';
import type { LengthUnit } from './length.ts';

/** What reading a written length gives: whole nanometres, or a sentence and its cure. */
export type ParsedLength = { ok: true; nm: number } | { ok: false; message: string; hint: string };

/** Longer texts are no length; refusing them first keeps the reader linear and quick. */
const MAX_TEXT = 60;
const MAX_DIGITS = 18;

const UNIT_WORDS: ReadonlyMap<string, LengthUnit> = new Map<string, LengthUnit>([
  ...['mm', 'millimetre', 'millimetres', 'millimeter', 'millimeters'].map((word) => [word, 'mm'] as const),
  ...['cm', 'centimetre', 'centimetres', 'centimeter', 'centimeters'].map((word) => [word, 'cm'] as const),
  ...['m', 'metre', 'metres', 'meter', 'meters'].map((word) => [word, 'm'] as const),
  ...['in', 'inch', 'inches', '"', '″', '”', "''", '′′', '’’'].map((word) => [word, 'in'] as const),
  ...['ft', 'foot', 'feet', "'", '′', '’'].map((word) => [word, 'ft'] as const),
]);

/** Single-character fractions of Unicode. */
const VULGAR_FRACTIONS: ReadonlyMap<string, readonly [number, number]> = new Map<
  string,
  readonly [number, number]
>([
  ['½', [1, 2]],
  ['⅓', [1, 3]],
  ['⅔', [2, 3]],
  ['¼', [1, 4]],
  ['¾', [3, 4]],
  ['⅕', [1, 5]],
  ['⅖', [2, 5]],
  ['⅗', [3, 5]],
  ['⅘', [4, 5]],
  ['⅙', [1, 6]],
  ['⅚', [5, 6]],
  ['⅛', [1, 8]],
  ['⅜', [3, 8]],
  ['⅝', [5, 8]],
  ['⅞', [7, 8]],
]);

type Token =
  | { type: 'number'; digits: string; decimals: number }
  | { type: 'vulgar'; over: readonly [number, number] }
  | { type: 'slash' | 'dash' | 'comma' }
  | { type: 'unit'; unit: LengthUnit }
  | { type: 'odd'; text: string };

/** A number as numerator over denominator, so that fractions and decimals stay exact until the single rounding. */
interface Ratio {
  over: bigint;
  under: bigint;
}

const EXAMPLES = 'Write it as 450 mm, 45 cm, 17 3/4 in, 17-3/4" or 1\' 5 3/4".';

function refuse(message: string, hint = EXAMPLES): ParsedLength {
  return { ok: false, message, hint };
}

function isDigit(char: string | undefined): boolean {
  return char !== undefined && char >= '0' && char <= '9';
}

function isSpace(char: string): boolean {
  return ' \t\n\r\u00a0\u2009\u202f'.includes(char);
}

function isMark(char: string): boolean {
  return '"″”\'′’'.includes(char);
}

/** One pass over the text, each character looked at once. */
function tokenize(text: string): Token[] {
  const tokens: Token[] = [];
  let i = 0;
  while (i < text.length) {
    const char = text.charAt(i);
    if (isSpace(char)) {
      i += 1;
      continue;
    }
    if (isDigit(char) || (char === '.' && isDigit(text[i + 1]))) {
      const start = i;
      while (isDigit(text[i])) i += 1;
      let digits = text.slice(start, i);
      let decimals = 0;
      if (text[i] === '.') {
        const from = (i += 1);
        while (isDigit(text[i])) i += 1;
        decimals = i - from;
        digits += text.slice(from, i);
      }
      tokens.push({ type: 'number', digits, decimals });
    } else if (VULGAR_FRACTIONS.has(char)) {
      tokens.push({ type: 'vulgar', over: VULGAR_FRACTIONS.get(char) ?? [0, 1] });
      i += 1;
    } else if (char === '/' || char === '⁄') {
      tokens.push({ type: 'slash' });
      i += 1;
    } else if (char === '-' || char === '−' || char === '–' || char === '‐' || char === '‑') {
      tokens.push({ type: 'dash' });
      i += 1;
    } else if (char === ',') {
      tokens.push({ type: 'comma' });
      i += 1;
    } else if (isMark(char)) {
      const doubled = char + text.charAt(i + 1);
      const word = UNIT_WORDS.has(doubled) ? doubled : char;
      tokens.push({ type: 'unit', unit: UNIT_WORDS.get(word) ?? 'in' });
      i += word.length;
    } else {
      const start = i;
      while (i < text.length && /[\p{L}\p{M}]/u.test(text.charAt(i))) i += 1;
      if (i === start) i += 1;
      const word = text.slice(start, i).toLowerCase();
      const unit = UNIT_WORDS.get(word);
      if (unit === undefined) {
        tokens.push({ type: 'odd', text: text.slice(start, i) });
      } else {
        // The full stop of an abbreviation: `17 in.`
        if (text[i] === '.' && !isDigit(text[i + 1])) i += 1;
        tokens.push({ type: 'unit', unit });
      }
    }
  }
  return tokens;
}

function add(a: Ratio, b: Ratio): Ratio {
  return { over: a.over * b.under + b.over * a.under, under: a.under * b.under };
}

function ratioOf(digits: string, decimals: number): Ratio {
  return { over: BigInt(digits === '' ? '0' : digits), under: 10n ** BigInt(decimals) };
}

/** Rounds a ratio of units to whole nanometres, halves away from zero. */
function toNm(ratio: Ratio, unit: LengthUnit): bigint {
  const scaled = ratio.over * BigInt(NM_PER_UNIT[unit]);
  return (scaled * 2n + ratio.under) / (ratio.under * 2n);
}

/** Reads `12`, `12.5`, `3/4`, `17 3/4`, `17-3/4` or `17¾` from `at`; gives where it ends, or a refusal. */
function readQuantity(tokens: readonly Token[], at: number): { ratio: Ratio; next: number } | ParsedLength {
  const first = tokens[at];
  if (first?.type === 'vulgar') {
    return { ratio: { over: BigInt(first.over[0]), under: BigInt(first.over[1]) }, next: at + 1 };
  }
  if (first?.type !== 'number') return refuse('A number is missing.');
  if (first.digits.length > MAX_DIGITS) return refuse('The number has too many digits.');

  const whole = ratioOf(first.digits, first.decimals);
  const readFraction = (index: number): { ratio: Ratio; next: number } | ParsedLength | undefined => {
    const over = tokens[index];
    const under = tokens[index + 2];
    if (over?.type !== 'number' || tokens[index + 1]?.type !== 'slash') return undefined;
    if (under?.type !== 'number') return refuse('The fraction has no denominator.', 'Write it as 3/4.');
    if (over.decimals > 0 || under.decimals > 0) {
      return refuse('A fraction is written with whole numbers.', 'Write it as 3/4.');
    }
    if (over.digits.length > MAX_DIGITS || under.digits.length > MAX_DIGITS) {
      return refuse('The number has too many digits.');
    }
    if (BigInt(under.digits) === 0n) return refuse('The denominator is zero.', 'Write it as 3/4.');
    return { ratio: { over: BigInt(over.digits), under: BigInt(under.digits) }, next: index + 3 };
  };

  const alone = readFraction(at);
  if (alone) return alone;

  const dash = tokens[at + 1]?.type === 'dash';
  const fractionAt = at + (dash ? 2 : 1);
  const vulgar = tokens[fractionAt];
  if (vulgar?.type === 'vulgar') {
    if (first.decimals > 0)
      return refuse('A decimal and a fraction cannot be mixed.', 'Write it as 17.75 or 17 3/4.');
    return {
      ratio: add(whole, { over: BigInt(vulgar.over[0]), under: BigInt(vulgar.over[1]) }),
      next: fractionAt + 1,
    };
  }
  const mixed = readFraction(fractionAt);
  if (mixed === undefined) return { ratio: whole, next: at + 1 };
  if ('ok' in mixed) return mixed;
  if (first.decimals > 0)
    return refuse('A decimal and a fraction cannot be mixed.', 'Write it as 17.75 or 17 3/4.');
  return { ratio: add(whole, mixed.ratio), next: mixed.next };
}

function refuseComma(text: string): ParsedLength {
  const shown = text.trim().replace(',', '.');
  return refuse(
    'A comma is not read, because it means thousands to some and decimals to others.',
    `Write a decimal point, ${shown}, or leave the comma out, ${text.trim().replaceAll(',', '')}.`,
  );
}

/**
 * Reads a length as people write it: `17 3/4`, `17-3/4"`, `17¾ in`, `1' 5 3/4"`, `1 ft 5 in`, `450`, `45 cm`, `0.45 m`, with
 * ASCII or typographic primes, fractions and minus signs. A number without a unit is in `defaultUnit`; a number without a
 * unit after feet is inches. The value is computed exactly and rounded once to the nearest nanometre.
 *
 * Refused, with a sentence and a cure: commas, unknown words, a zero denominator, more than one unit other than feet and
 * inches, more than 60 characters, more than 1 km. Linear in the text.
 */
export function parseLength(text: string, defaultUnit: LengthUnit): ParsedLength {
  if (text.length > MAX_TEXT) return refuse('That is too long to be a length.');
  const tokens = tokenize(text);
  if (tokens.length === 0) return refuse('A length is missing.');
  if (tokens.some((token) => token.type === 'comma')) return refuseComma(text);
  const odd = tokens.find((token) => token.type === 'odd');
  if (odd?.type === 'odd')
    return refuse(`“${odd.text}” is not a unit of length.`, 'Use mm, cm, m, in or ft.');

  let at = 0;
  const isNegative = tokens[0]?.type === 'dash';
  if (isNegative) at = 1;

  const first = readQuantity(tokens, at);
  if ('ok' in first) return first;
  const unitToken = tokens[first.next];
  let unit = defaultUnit;
  let next = first.next;
  if (unitToken?.type === 'unit') {
    unit = unitToken.unit;
    next += 1;
  }
  let nm = toNm(first.ratio, unit);

  // Feet may be followed by inches, with or without a dash between and a mark behind.
  if (unitToken?.type === 'unit' && unit === 'ft' && next < tokens.length) {
    if (tokens[next]?.type === 'dash') next += 1;
    const inches = readQuantity(tokens, next);
    if ('ok' in inches) return inches;
    next = inches.next;
    const inchUnit = tokens[next];
    if (inchUnit?.type === 'unit') {
      if (inchUnit.unit !== 'in')
        return refuse('Feet are followed by inches only.', 'Write it as 1\' 5 3/4".');
      next += 1;
    }
    nm += toNm(inches.ratio, 'in');
  }

  if (next < tokens.length) {
    const rest = tokens[next];
    if (rest?.type === 'unit') return refuse('There are two units.', EXAMPLES);
    if (unitToken?.type === 'unit') return refuse('There is something after the unit.', EXAMPLES);
    return refuse('The number cannot be read.', EXAMPLES);
  }
  if (nm > BigInt(MAX_LENGTH_NM)) return refuse('That is longer than 1 km.', 'Check the unit.');
  return { ok: true, nm: nm === 0n ? 0 : Number(isNegative ? -nm : nm) };
}
