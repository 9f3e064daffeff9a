import { randomUUID } from 'node:crypto';
import { QueryTypes } from 'sequelize';
import { describe, expect, it } from 'vitest';
import { sequelize } from '#db/client.ts';
import { LedgerAccount, LedgerEntry, LedgerTransaction } from '#db/models/index.ts';
import { refundOrder } from '#server/checkout/refund-order.ts';
import { settleOrder } from '#server/checkout/settle-order.ts';
import { startCheckout } from '#server/checkout/start-checkout.ts';
import { getSalesBook } from '#server/sales/get-sales-book.ts';
import { createSource } from '#server/sales/manage-sources.ts';
import { getPayoutPage, openPaymentAccount, sendPayout, startPayout } from '#server/sales/pay-out.ts';
import { sumImprint } from '#server/sales/sum-imprint.ts';
import { writeStatement } from '#server/sales/write-statement.ts';
import { Payout, Source } from '#db/models/index.ts';
import { actAs, codeOf } from './people.ts';
import { control, makeBuyer, makeShopPlan, payOrder } from './shop-floor.ts';

async function makeAccounts() {
  const clearing = await LedgerAccount.findOrCreate({
    where: { kind: 'clearing', currency: 'EUR', imprintId: null },
  });
  const house = await LedgerAccount.findOrCreate({
    where: { kind: 'house', currency: 'EUR', imprintId: null },
  });
  return [clearing[0].id, house[0].id] as const;
}

async function post(amounts: readonly [number, number]): Promise<string> {
  const accounts = await makeAccounts();
  return sequelize.transaction(async (transaction) => {
    const entry = await LedgerTransaction.create(
      { id: randomUUID(), reference: randomUUID(), kind: 'adjustment' },
      { transaction },
    );
    for (const [index, amountMinor] of amounts.entries()) {
      await LedgerEntry.create(
        {
          id: randomUUID(),
          transactionId: entry.id,
          accountId: accounts[index] ?? '',
          currency: 'EUR',
          amountMinor,
        },
        { transaction },
      );
    }
    return entry.id;
  });
}

describe('the ledger, in the database itself', () => {
  it('takes a transaction that sums to zero and refuses one that does not', async () => {
    await expect(post([500, -500])).resolves.toBeDefined();
    await expect(post([500, -499])).rejects.toThrow('does not sum to zero');
  });

  it('refuses a transaction without entries', async () => {
    await expect(
      LedgerTransaction.create({ id: randomUUID(), reference: randomUUID(), kind: 'adjustment' }),
    ).rejects.toThrow('has no entries');
  });

  it('refuses every change and every removal', async () => {
    const id = await post([100, -100]);
    const run = (sql: string) => sequelize.query(sql, { replacements: { id }, type: QueryTypes.RAW });
    await expect(
      run('update ledger_entries set amount_minor = amount_minor * 2 where transaction_id = :id'),
    ).rejects.toThrow('only ever added to');
    await expect(run('delete from ledger_entries where transaction_id = :id')).rejects.toThrow(
      'only ever added to',
    );
    await expect(run('update ledger_transactions set memo = :id where id = :id')).rejects.toThrow(
      'only ever added to',
    );
  });
});

describe('a month of sales', () => {
  it('stands in the sales book with its source, and its statement adds up to the cent', async () => {
    const { imprint, owner, plan, offer } = await makeShopPlan(2400, '=SUM(A1:A9) shelf');
    const actor = await actAs(owner);
    await createSource({ actor, imprintSlug: imprint.slug, label: `Video ${imprint.slug}`, kind: 'video' });
    const source = await Source.findOne({ where: { imprintId: imprint.id }, rejectOnEmpty: true });
    const orders: string[] = [];
    for (const country of ['DE', 'US', 'FR']) {
      const { orderId } = await startCheckout({
        actor: await makeBuyer(),
        offerId: offer.id,
        fitId: null,
        code: '',
        sourceSlug: source.slug,
        requestKey: randomUUID(),
        hasConsented: true,
      });
      await settleOrder(await payOrder(orderId, country));
      orders.push(orderId);
    }
    await refundOrder({
      actor,
      orderId: orders[0] ?? '',
      amountMinor: 777,
      reason: 'part',
      requestKey: randomUUID(),
    });
    await refundOrder({ actor, orderId: orders[1] ?? '', reason: 'whole', requestKey: randomUUID() });

    const book = await getSalesBook(actor, imprint.slug, {});
    expect(book.bySource.map((row) => [row.label, row.sales, row.grossMinor, row.refundedMinor])).toEqual([
      [`Video ${imprint.slug}`, 3, 7200, 3177],
    ]);
    for (const movement of book.movements) {
      expect(movement.taxMinor + movement.feeMinor + movement.houseMinor + movement.imprintMinor).toBe(
        movement.grossMinor,
      );
    }
    const balance = (await sumImprint(imprint.id))[0];
    const sum = book.movements.reduce((total, movement) => total + movement.imprintMinor, 0);
    expect(balance?.owedMinor).toBe(sum);

    const month = new Date().toISOString().slice(0, 7);
    const statement = await writeStatement({ actor, slug: imprint.slug, month, currency: 'EUR' });
    const rows = statement.csv.trimEnd().split('\r\n');
    expect(rows.length).toBe(1 + 1 + 5 + 1);
    expect([statement.openingMinor, statement.closingMinor]).toEqual([0, sum]);
    // A spreadsheet must not run a plan's title.
    expect(statement.csv).toContain(`'${plan.title}`);
    expect(
      await codeOf(writeStatement({ actor: await makeBuyer(), slug: imprint.slug, month, currency: 'EUR' })),
    ).toBe('NOT_FOUND');
  });

  it('is paid out once, and the balance is nothing afterwards', async () => {
    const { imprint, owner, offer } = await makeShopPlan(5000);
    const actor = await actAs(owner);
    const { orderId } = await startCheckout({
      actor: await makeBuyer(),
      offerId: offer.id,
      fitId: null,
      code: '',
      sourceSlug: null,
      requestKey: randomUUID(),
      hasConsented: true,
    });
    await settleOrder(await payOrder(orderId, 'US'));
    expect(await codeOf(startPayout({ actor, slug: imprint.slug, currency: 'EUR' }))).toBe('BAD_INPUT');
    await openPaymentAccount(actor, imprint.slug);
    await imprint.reload();
    await control('onboard', { account: imprint.paymentAccountId });
    expect((await getPayoutPage(actor, imprint.slug)).payoutsEnabled).toBe(true);
    await startPayout({ actor, slug: imprint.slug, currency: 'EUR' });
    expect(await codeOf(startPayout({ actor, slug: imprint.slug, currency: 'EUR' }))).toBe('CONFLICT');
    const payout = await Payout.findOne({ where: { imprintId: imprint.id }, rejectOnEmpty: true });
    await sendPayout(payout.id);
    await sendPayout(payout.id);
    expect((await payout.reload()).state).toBe('sent');
    expect((await sumImprint(imprint.id)).map((balance) => balance.owedMinor)).toEqual([0]);
  });
});
