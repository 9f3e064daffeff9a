/** Currencies without minor units: an amount counts whole units. Source: the payment service's page on currencies. */
const ZERO_DECIMAL = new Set('bif clp djf gnf jpy kmf krw mga pyg rwf ugx vnd vuv xaf xof xpf'.split(' '));

/** Smallest amount that can be charged, in minor units. Source: the payment service's page on currencies, from memory. */
const MINIMUM: Readonly<Record<string, number>> = {
  usd: 50,
  aud: 50,
  brl: 50,
  cad: 50,
  chf: 50,
  eur: 50,
  inr: 50,
  nzd: 50,
  sgd: 50,
  czk: 1500,
  dkk: 250,
  gbp: 30,
  hkd: 400,
  huf: 17500,
  jpy: 50,
  mxn: 1000,
  nok: 300,
  pln: 200,
  sek: 300,
};

/** Whether an ISO 4217 code in lower case is one that the stand-in charges in. */
export function isCurrency(code: string): boolean {
  return Object.hasOwn(MINIMUM, code) || ZERO_DECIMAL.has(code);
}

/** Smallest chargeable amount in minor units. */
export function minimumOf(currency: string): number {
  return MINIMUM[currency] ?? 50;
}

/** Amount in minor units as people read it, such as `USD 12.50` or `JPY 1,250`. */
export function printAmount(amountMinor: number, currency: string): string {
  const digits = ZERO_DECIMAL.has(currency) ? 0 : 2;
  const number = (amountMinor / 10 ** digits).toLocaleString('en-GB', {
    minimumFractionDigits: digits,
    maximumFractionDigits: digits,
  });
  return `${currency.toUpperCase()} ${number}`;
}
