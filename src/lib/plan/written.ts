import type { WrittenPrice } from './types.ts';

/** What reading a written value gives: the value, or what was wanted in the author's syntax. */
export type Written<T> = { ok: true; value: T } | { ok: false; message: string; hint: string };

/** Currencies with no minor unit or with three decimals (ISO 4217); all others have two. */
const DECIMALS: ReadonlyMap<string, number> = new Map([
  ...['JPY', 'KRW', 'VND', 'CLP', 'ISK', 'XOF', 'XAF', 'PYG', 'UGX'].map((code) => [code, 0] as const),
  ...['BHD', 'JOD', 'KWD', 'OMR', 'TND'].map((code) => [code, 3] as const),
]);

const PER: ReadonlyMap<string, WrittenPrice['per']> = new Map<string, WrittenPrice['per']>([
  ['board foot', 'board-foot'],
  ['bf', 'board-foot'],
  ['m3', 'm3'],
  ['m³', 'm3'],
  ['m2', 'm2'],
  ['m²', 'm2'],
  ['m', 'm'],
]);

/**
 * Reads a price as authors write it: `78.00 EUR`, `6.80 EUR/board foot`, `900 EUR/m3`. Minor units follow ISO 4217. A comma
 * is refused. At most 40 characters, so that no text is slow to read.
 */
export function parsePrice(text: string): Written<WrittenPrice> {
  const hint = 'Write it as "78.00 EUR", "6.80 EUR/board foot", "900 EUR/m3", "12 EUR/m2" or "4.50 EUR/m".';
  if (text.length > 40) return { ok: false, message: 'The price is too long.', hint };
  const match = /^(\d{1,9})(?:\.(\d{1,3}))? ([A-Z]{3})(?: ?\/ ?([a-z0-9²³ ]{1,12}))?$/.exec(text.trim());
  if (!match) return { ok: false, message: 'The price cannot be read.', hint };
  const currency = match[3] ?? '';
  const decimals = DECIMALS.get(currency) ?? 2;
  const cents = match[2] ?? '';
  if (cents.length > decimals) {
    return { ok: false, message: `A price in ${currency} has at most ${decimals} decimals.`, hint };
  }
  const per = match[4] === undefined ? 'piece' : PER.get(match[4].trim());
  if (per === undefined) return { ok: false, message: `A price per ${match[4]?.trim()} is not known.`, hint };
  const minor = Number(match[1]) * 10 ** decimals + Number(cents.padEnd(decimals, '0') || '0');
  return { ok: true, value: { minor, currency, per } };
}

/** What one unit of a consumable covers. */
export interface Coverage {
  amount: number;
  measure: 'm2' | 'm';
  unit: string;
}

/** Square metres in one of each area, metres in one of each length, exact by definition of the foot. */
const COVERS: ReadonlyMap<string, readonly ['m2' | 'm', number]> = new Map<
  string,
  readonly ['m2' | 'm', number]
>([
  ['m2', ['m2', 1]],
  ['m²', ['m2', 1]],
  ['sq ft', ['m2', 0.09290304]],
  ['m', ['m', 1]],
  ['ft', ['m', 0.3048]],
]);

/** Reads a coverage: `10 m2/l`, `400 sq ft/gal`, `35 m/bottle`. At most 40 characters. */
export function parseCoverage(text: string): Written<Coverage> {
  const hint = 'Write it as "10 m2/l" for a surface or "35 m/bottle" for a joint.';
  if (text.length > 40) return { ok: false, message: 'The coverage is too long.', hint };
  const match = /^(\d{1,6}(?:\.\d{1,3})?) (m2|m²|sq ft|m|ft) ?\/ ?([\p{L}][\p{L} ]{0,19})$/u.exec(
    text.trim(),
  );
  const covers = COVERS.get(match?.[2] ?? '');
  if (!match || !covers) return { ok: false, message: 'The coverage cannot be read.', hint };
  const amount = Number(match[1]) * covers[1];
  if (amount <= 0) return { ok: false, message: 'A coverage must be more than nothing.', hint };
  return { ok: true, value: { amount, measure: covers[0], unit: (match[3] ?? '').trim() } };
}

/** Reads a mass: `90 kg`, `200 lb`; kilograms. At most 20 characters. */
export function parseMass(text: string): Written<number> {
  const hint = 'Write it as "90 kg" or "200 lb".';
  const match = text.length > 20 ? null : /^(\d{1,6}(?:\.\d{1,3})?) ?(kg|lb)$/.exec(text.trim());
  if (!match) return { ok: false, message: 'The mass cannot be read.', hint };
  return { ok: true, value: Number(match[1]) * (match[2] === 'lb' ? 0.45359237 : 1) };
}
