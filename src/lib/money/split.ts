/**
 * How a sale is shared out, in integer minor units. Nothing here rounds twice: what is cut off in one place is given in another,
 * so every split adds up to the cent.
 */

/** Refuses anything that is not a whole number of minor units. */
function requireMinor(amount: number, what: string): void {
  if (!Number.isSafeInteger(amount))
    throw new RangeError(`${what} must be a whole number of minor units, not ${amount}`);
}

/**
 * Shares `total` out by `weights` so that the parts add up to it (largest remainder; of equal remainders the first).
 * Weights that are all zero share equally. Negative totals are shared like positive ones.
 * @throws RangeError for a fractional total, a negative weight, or no weights at all
 */
export function allocate(total: number, weights: readonly number[]): number[] {
  requireMinor(total, 'the total');
  if (weights.length === 0) throw new RangeError('nothing to share out to');
  if (weights.some((weight) => !Number.isSafeInteger(weight) || weight < 0))
    throw new RangeError('weights must be whole and not negative');
  const sum = weights.reduce((a, b) => a + b, 0);
  const used = sum === 0 ? weights.map(() => 1) : weights;
  const whole = BigInt(sum === 0 ? weights.length : sum);
  const amount = BigInt(Math.abs(total));
  const shares = used.map((weight, index) => {
    const product = amount * BigInt(weight);
    return { index, part: Number(product / whole), rest: product % whole };
  });
  let left = Math.abs(total) - shares.reduce((a, share) => a + share.part, 0);
  const byRest = [...shares].sort((a, b) =>
    a.rest === b.rest ? a.index - b.index : a.rest > b.rest ? -1 : 1,
  );
  for (const share of byRest) {
    if (left === 0) break;
    share.part += 1;
    left -= 1;
  }
  const sign = total < 0 ? -1 : 1;
  // Adding zero turns -0 into 0.
  return shares.map((share) => sign * share.part + 0);
}

/** One order line as it was paid. The total includes the tax; the fee is what the payment service kept of it. */
export interface PaidLine {
  totalMinor: number;
  taxMinor: number;
  feeMinor: number;
  /** The imprint's part of what is left after tax and fee, in thousandths. */
  sharePermille: number;
}

/** Where a line's money went; the five add up to zero. Positive: received, negative: owed or earned. */
export interface LedgerSplit {
  clearingMinor: number;
  feesMinor: number;
  taxMinor: number;
  imprintMinor: number;
  houseMinor: number;
}

/**
 * The entries of a sale. The imprint's share is rounded down to a whole minor unit, the house takes the rest.
 * A fee larger than what is left after tax is the house's loss, never the imprint's debt.
 */
export function splitSale(line: PaidLine): LedgerSplit {
  const { totalMinor, taxMinor, feeMinor, sharePermille } = line;
  requireMinor(totalMinor, 'the total');
  requireMinor(taxMinor, 'the tax');
  requireMinor(feeMinor, 'the fee');
  if (totalMinor < 0 || taxMinor < 0 || feeMinor < 0 || taxMinor > totalMinor)
    throw new RangeError('amounts of a sale are out of range');
  if (!Number.isInteger(sharePermille) || sharePermille < 0 || sharePermille > 1000)
    throw new RangeError('a share is 0 to 1000 thousandths');
  const left = Math.max(0, totalMinor - taxMinor - feeMinor);
  const imprint = Math.floor((left * sharePermille) / 1000);
  // The house's income is counted before the fee, which stands as a cost of its own.
  const house = totalMinor - taxMinor - imprint;
  return {
    clearingMinor: totalMinor - feeMinor,
    feesMinor: feeMinor,
    taxMinor: -taxMinor + 0,
    imprintMinor: -imprint + 0,
    houseMinor: -house + 0,
  };
}

/**
 * The entries of a refund, full or part. The buyer gets `refundMinor` back; tax and share are taken back in the same proportion,
 * so that several part refunds that make up the whole leave tax and imprint at exactly zero. The payment service keeps
 * its fee, and the house bears it.
 * @param alreadyMinor what was refunded of this line before
 * @throws RangeError when more would be refunded than was paid
 */
export function splitRefund(line: PaidLine, alreadyMinor: number, refundMinor: number): LedgerSplit {
  requireMinor(alreadyMinor, 'the earlier refund');
  requireMinor(refundMinor, 'the refund');
  const after = alreadyMinor + refundMinor;
  if (refundMinor <= 0 || alreadyMinor < 0 || after > line.totalMinor)
    throw new RangeError('more would be refunded than was paid');
  const sale = splitSale(line);
  const partOf = (amount: number, refunded: number) => Math.round((amount * refunded) / line.totalMinor);
  const tax = partOf(-sale.taxMinor, after) - partOf(-sale.taxMinor, alreadyMinor);
  const imprint = partOf(-sale.imprintMinor, after) - partOf(-sale.imprintMinor, alreadyMinor);
  return {
    clearingMinor: -refundMinor,
    feesMinor: 0,
    taxMinor: tax,
    imprintMinor: imprint,
    houseMinor: refundMinor - tax - imprint,
  };
}
