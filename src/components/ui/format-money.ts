/**
 * A price in the reader's way of writing it, from whole minor units. How many minor units make one of the currency is
 * taken from the platform's own table, so that yen and dinars come out right.
 */
export function formatMoney(minor: number, currency: string, locale = 'en'): string {
  const format = new Intl.NumberFormat(locale, { style: 'currency', currency });
  const digits = format.resolvedOptions().maximumFractionDigits ?? 2;
  return format.format(minor / 10 ** digits);
}
