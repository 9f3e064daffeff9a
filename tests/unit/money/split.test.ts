import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { allocate, splitRefund, splitSale, type LedgerSplit } from '#lib/money/split.ts';

const sumOf = (split: LedgerSplit) => Object.values(split).reduce((a: number, b: number) => a + b, 0);
const line = fc
  .record({
    totalMinor: fc.integer({ min: 1, max: 1_000_000 }),
    taxPermille: fc.integer({ min: 0, max: 300 }),
    feeMinor: fc.integer({ min: 0, max: 5_000 }),
    sharePermille: fc.integer({ min: 0, max: 1000 }),
  })
  .map(({ taxPermille, ...rest }) => ({
    ...rest,
    taxMinor: Math.floor((rest.totalMinor * taxPermille) / 1000),
  }));

describe('sharing an amount out', () => {
  it('gives the odd cents to the largest remainders', () => {
    // 100 by 1:1:1 is 33 1/3 each; the first gets the odd cent.
    expect(allocate(100, [1, 1, 1])).toEqual([34, 33, 33]);
    // 1001 by 50:30:20 is 500.5, 300.3, 200.2: the .5 gets it.
    expect(allocate(1001, [50, 30, 20])).toEqual([501, 300, 200]);
  });

  it('adds up for any total and weights', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: -1e9, max: 1e9 }),
        fc.array(fc.nat(1e6), { minLength: 1, maxLength: 20 }),
        (total, weights) => {
          expect(allocate(total, weights).reduce((a, b) => a + b, 0)).toBe(total);
        },
      ),
    );
  });

  it('refuses half cents', () => {
    expect(() => allocate(0.5, [1])).toThrow('whole number of minor units');
  });
});

describe('a sale', () => {
  it('gives tax to the tax account, the fee to the payment service and 85 % of the rest to the imprint', () => {
    // 29.00 with 19 % tax inside: 29.00 - 29.00/1.19 = 4.63. Fee 1.14. Left 23.23; 85 % is 19.7455, rounded down 19.74; house 3.49 and the fee.
    expect(splitSale({ totalMinor: 2900, taxMinor: 463, feeMinor: 114, sharePermille: 850 })).toEqual({
      clearingMinor: 2786,
      feesMinor: 114,
      taxMinor: -463,
      imprintMinor: -1974,
      houseMinor: -463,
    });
  });

  it('sums to zero, whatever the amounts', () => {
    fc.assert(
      fc.property(line, (paid) => {
        expect(sumOf(splitSale(paid))).toBe(0);
      }),
    );
  });

  it('never leaves the imprint in debt for a fee', () => {
    expect(splitSale({ totalMinor: 20, taxMinor: 0, feeMinor: 31, sharePermille: 850 }).imprintMinor).toBe(0);
  });
});

describe('a refund', () => {
  it('takes the whole share and tax back, and leaves the fee with the house', () => {
    const paid = { totalMinor: 2900, taxMinor: 463, feeMinor: 114, sharePermille: 850 };
    // House: 3.49 of its own and the fee of 1.14.
    expect(splitRefund(paid, 0, 2900)).toEqual({
      clearingMinor: -2900,
      feesMinor: 0,
      taxMinor: 463,
      imprintMinor: 1974,
      houseMinor: 463,
    });
  });

  it('in parts comes to the same as in one, to the cent', () => {
    fc.assert(
      fc.property(line, fc.array(fc.nat(1000), { minLength: 1, maxLength: 6 }), (paid, cuts) => {
        const stops = [...new Set(cuts.map((cut) => Math.floor((paid.totalMinor * cut) / 1000)))]
          .filter((at) => at > 0 && at < paid.totalMinor)
          .sort((a, b) => a - b);
        let already = 0;
        const sum = { imprint: 0, tax: 0 };
        for (const stop of [...stops, paid.totalMinor]) {
          const split = splitRefund(paid, already, stop - already);
          expect(sumOf(split)).toBe(0);
          sum.imprint += split.imprintMinor;
          sum.tax += split.taxMinor;
          already = stop;
        }
        const sale = splitSale(paid);
        expect(sum.imprint + sale.imprintMinor).toBe(0);
        expect(sum.tax + sale.taxMinor).toBe(0);
      }),
    );
  });

  it('is never larger than what was paid', () => {
    expect(() =>
      splitRefund({ totalMinor: 100, taxMinor: 0, feeMinor: 0, sharePermille: 500 }, 60, 41),
    ).toThrow('more would be refunded');
  });
});
