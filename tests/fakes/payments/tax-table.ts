/**
 * Tax by the buyer's country, in thousandths. This table belongs to the stand-in: general rates for digital goods, from memory, no states or regions,
 * good enough to see that totals add up and for nothing else. A country that is not listed pays none.
 */
const RATES: Readonly<Record<string, { permille: number; name: string }>> = {
  AT: { permille: 200, name: 'VAT' },
  AU: { permille: 100, name: 'GST' },
  BE: { permille: 210, name: 'VAT' },
  CA: { permille: 50, name: 'GST' },
  CH: { permille: 81, name: 'VAT' },
  DE: { permille: 190, name: 'VAT' },
  DK: { permille: 250, name: 'VAT' },
  ES: { permille: 210, name: 'VAT' },
  FI: { permille: 255, name: 'VAT' },
  FR: { permille: 200, name: 'VAT' },
  GB: { permille: 200, name: 'VAT' },
  IE: { permille: 230, name: 'VAT' },
  IT: { permille: 220, name: 'VAT' },
  JP: { permille: 100, name: 'Consumption tax' },
  NL: { permille: 210, name: 'VAT' },
  NO: { permille: 250, name: 'VAT' },
  NZ: { permille: 150, name: 'GST' },
  PL: { permille: 230, name: 'VAT' },
  PT: { permille: 230, name: 'VAT' },
  SE: { permille: 250, name: 'VAT' },
};

/** Countries that the hosted page offers, by ISO 3166-1 code. */
export const COUNTRIES: Readonly<Record<string, string>> = {
  AT: 'Austria',
  AU: 'Australia',
  BE: 'Belgium',
  BR: 'Brazil',
  CA: 'Canada',
  CH: 'Switzerland',
  DE: 'Germany',
  DK: 'Denmark',
  ES: 'Spain',
  FI: 'Finland',
  FR: 'France',
  GB: 'United Kingdom',
  IE: 'Ireland',
  IN: 'India',
  IT: 'Italy',
  JP: 'Japan',
  MX: 'Mexico',
  NL: 'Netherlands',
  NO: 'Norway',
  NZ: 'New Zealand',
  PL: 'Poland',
  PT: 'Portugal',
  SE: 'Sweden',
  SG: 'Singapore',
  US: 'United States',
  ZA: 'South Africa',
};

/** Rate in thousandths and name of the tax, or null where the country pays none. */
export function taxOf(country: string | null): { permille: number; name: string } | null {
  return country !== null && Object.hasOwn(RATES, country) ? (RATES[country] ?? null) : null;
}
