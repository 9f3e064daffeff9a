import type Stripe from 'stripe';
import type { Coupon, LineItem, SessionFile } from './tables.ts';
import { taxOf } from './tax-table.ts';

/** Shares an amount out over weights so that the parts add up to it exactly; the largest remainders get the odd units. */
function shareOut(amount: number, weights: readonly number[]): number[] {
  const sum = weights.reduce((total, weight) => total + weight, 0);
  if (sum === 0) return weights.map(() => 0);
  const exact = weights.map((weight) => (amount * weight) / sum);
  const parts = exact.map(Math.floor);
  const order = exact
    .map((value, index) => ({ index, rest: value - Math.floor(value) }))
    .sort((a, b) => b.rest - a.rest || a.index - b.index);
  let left = amount - parts.reduce((total, part) => total + part, 0);
  for (const { index } of order) {
    if (left <= 0) break;
    parts[index] = (parts[index] ?? 0) + 1;
    left -= 1;
  }
  return parts;
}

/** What a coupon takes off, in minor units: never more than there is. */
function discountOf(coupon: Coupon, subtotal: number): number {
  if (coupon.percent_off !== null) return Math.round((subtotal * coupon.percent_off) / 100);
  return Math.min(coupon.amount_off ?? 0, subtotal);
}

function rateOf(
  country: string,
  tax: { permille: number; name: string },
  isInclusive: boolean,
): Stripe.TaxRate {
  const percentage = tax.permille / 10;
  return {
    id: `txr_standin${country}${isInclusive ? 'incl' : 'excl'}`,
    object: 'tax_rate',
    active: true,
    country,
    created: 1_700_000_000,
    description: 'Rate of the payment stand-in, not for real use',
    display_name: tax.name,
    effective_percentage: percentage,
    flat_amount: null,
    inclusive: isInclusive,
    jurisdiction: country,
    jurisdiction_level: 'country',
    livemode: false,
    metadata: {},
    percentage,
    rate_type: 'percentage',
    state: null,
    tax_type: tax.name === 'VAT' ? 'vat' : 'gst',
  };
}

interface Totals {
  lines: LineItem[];
  taxes: SessionFile['taxes'];
  subtotal: number;
  discount: number;
  tax: number;
  total: number;
}

/**
 * Works out a session. Discounts come off before tax and are shared out over the lines; tax is rounded by line, half up. Prices whose tax behaviour is
 * unspecified count as exclusive. As published, the subtotal and total of a line with inclusive tax contain that tax.
 */
export function totalUp(given: readonly LineItem[], coupon: Coupon | null, country: string | null): Totals {
  const subtotals = given.map((line) => (line.price.unit_amount ?? 0) * (line.quantity ?? 1));
  const subtotal = subtotals.reduce((sum, value) => sum + value, 0);
  const discounts = shareOut(coupon ? discountOf(coupon, subtotal) : 0, subtotals);
  const rate = taxOf(country);
  const taxes: SessionFile['taxes'] = [];
  const lines = given.map((line, index) => {
    const lineSubtotal = subtotals[index] ?? 0;
    const discount = discounts[index] ?? 0;
    const net = lineSubtotal - discount;
    const isInclusive = line.price.tax_behavior === 'inclusive';
    const tax = rate ? Math.round((net * rate.permille) / (isInclusive ? 1000 + rate.permille : 1000)) : 0;
    if (rate && country) {
      taxes.push({
        amount: tax,
        taxable: isInclusive ? net - tax : net,
        rate: rateOf(country, rate, isInclusive),
      });
    }
    return {
      ...line,
      amount_subtotal: lineSubtotal,
      amount_discount: discount,
      amount_tax: tax,
      amount_total: net + (isInclusive ? 0 : tax),
    };
  });
  const sumOf = (pick: (line: LineItem) => number): number =>
    lines.reduce((sum, line) => sum + pick(line), 0);
  return {
    lines,
    taxes,
    subtotal,
    discount: sumOf((line) => line.amount_discount),
    tax: sumOf((line) => line.amount_tax),
    total: sumOf((line) => line.amount_total),
  };
}
