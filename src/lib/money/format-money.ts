/** Digits after the point of each currency that we sell in; ISO 4217. */
const MINOR_DIGITS: Record<string, number> = { EUR: 2, USD: 2, GBP: 2, CAD: 2, AUD: 2, JPY: 0 };

/** Digits after the point of a currency (ISO 4217); two where we do not know it. */
export function minorDigits(currency: string): number {
  return MINOR_DIGITS[currency.toUpperCase()] ?? 2;
}

/** An amount for people, e.g. `€12.50`. `minor` is a whole number of minor units. */
export function formatMoney(minor: number, currency: string, locale = 'en-GB'): string {
  const digits = minorDigits(currency);
  return new Intl.NumberFormat(locale, {
    style: 'currency',
    currency,
    minimumFractionDigits: digits,
    maximumFractionDigits: digits,
  }).format(minor / 10 ** digits);
}

/** An amount for a spreadsheet: plain digits with a point, e.g. `-12.50`. */
export function writeAmount(minor: number, currency: string): string {
  if (!Number.isSafeInteger(minor)) throw new RangeError(`not a whole number of minor units: ${minor}`);
  const digits = minorDigits(currency);
  const text = String(Math.abs(minor)).padStart(digits + 1, '0');
  const sign = minor < 0 ? '-' : '';
  return digits === 0 ? sign + text : `${sign}${text.slice(0, -digits)}.${text.slice(-digits)}`;
}

/**
 * Reads a typed price such as `24`, `24.5` or `24.50` into minor units.
 * @returns null when it is not a price in that currency, is negative, or has too many digits
 */
export function parseAmount(text: string, currency: string): number | null {
  const match = /^\s*(\d{1,7})(?:\.(\d{1,2}))?\s*$/.exec(text.slice(0, 40));
  if (!match) return null;
  const digits = minorDigits(currency);
  const fraction = match[2] ?? '';
  if (fraction.length > digits) return null;
  return Number(match[1]) * 10 ** digits + Number(fraction.padEnd(digits, '0') || '0');
}
