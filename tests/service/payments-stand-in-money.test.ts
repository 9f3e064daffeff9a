import type Stripe from 'stripe';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import type { RunningPayments } from '#tests/fakes/payments/start-payments.ts';
import { connect, control, planSession, startOwn } from './payments-stand-in-setup.ts';

let running: RunningPayments;
let stripe: Stripe;
beforeAll(async () => {
  running = await startOwn();
  stripe = connect(running);
});
afterAll(() => running.close());

/** A paid session's payment intent. */
async function pay(card = '4242424242424242'): Promise<string> {
  const { id } = await stripe.checkout.sessions.create(planSession());
  return String((await control(running, 'pay', { session: id, card }))['payment_intent']);
}

async function makeAccount(): Promise<string> {
  const { id } = await stripe.accounts.create({
    type: 'express',
    country: 'US',
    capabilities: { transfers: { requested: true } },
  });
  return id;
}

const availableOf = async (account?: string): Promise<number> =>
  (await stripe.balance.retrieve({}, account ? { stripeAccount: account } : {})).available.find(
    ({ currency }) => currency === 'usd',
  )?.amount ?? 0;

describe('refunds', () => {
  it('add up part by part, leave the fee paid, and end with the whole', async () => {
    const before = await availableOf();
    const intent = await pay();
    const first = await stripe.refunds.create({
      payment_intent: intent,
      amount: 1000,
      reason: 'requested_by_customer',
    });
    expect(first).toMatchObject({ status: 'succeeded', amount: 1000, reason: 'requested_by_customer' });
    await stripe.refunds.create({ payment_intent: intent });
    const { latest_charge: charge } = await stripe.paymentIntents.retrieve(intent, {
      expand: ['latest_charge.refunds'],
    });
    expect(charge).toMatchObject({
      amount_refunded: 4900,
      refunded: true,
      refunds: { data: [{ amount: 3900 }, { amount: 1000 }] },
    });
    expect(await availableOf()).toBe(before - 172);
    expect((await stripe.refunds.list({ payment_intent: intent })).data.map(({ amount }) => amount)).toEqual([
      3900, 1000,
    ]);
    await expect(stripe.refunds.create({ payment_intent: intent })).rejects.toMatchObject({
      code: 'charge_already_refunded',
    });
  });

  it('of more than is left are refused, and give nothing back', async () => {
    const intent = await pay();
    await stripe.refunds.create({ payment_intent: intent, amount: 4000 });
    await expect(stripe.refunds.create({ payment_intent: intent, amount: 901 })).rejects.toThrow(
      /greater than unrefunded amount/,
    );
    await expect(stripe.refunds.create({ payment_intent: intent, amount: 0 })).rejects.toMatchObject({
      param: 'amount',
    });
    expect((await stripe.refunds.list({ payment_intent: intent })).data).toHaveLength(1);
  });
});

describe('disputes', () => {
  it('take the money of the card that disputes, and give it back when they are won', async () => {
    const before = await availableOf();
    const intent = await pay('4000000000000259');
    const [dispute] = (await stripe.disputes.list({ payment_intent: intent })).data;
    expect(dispute).toMatchObject({ status: 'needs_response', amount: 4900, reason: 'fraudulent' });
    // The fee of the payment (1.72) and of the dispute (15.00) are gone, the price came and went.
    expect(await availableOf()).toBe(before - 172 - 1500);
    await expect(stripe.refunds.create({ payment_intent: intent })).rejects.toMatchObject({
      code: 'charge_disputed',
    });
    await control(running, 'dispute', { dispute: dispute?.id, outcome: 'won' });
    expect((await stripe.disputes.retrieve(dispute?.id ?? '')).status).toBe('won');
    expect(await availableOf()).toBe(before + 4900 - 172);
  });
});

describe('connected accounts', () => {
  it('can be paid once their owner has been through the onboarding page, whose link works once', async () => {
    const account = await makeAccount();
    const link = await stripe.accountLinks.create({
      account,
      type: 'account_onboarding',
      refresh_url: 'http://shop.test/again',
      return_url: 'http://shop.test/back',
    });
    await pay();
    await expect(
      stripe.transfers.create({ amount: 100, currency: 'usd', destination: account }),
    ).rejects.toMatchObject({
      code: 'insufficient_capabilities_for_transfer',
    });
    expect(await (await fetch(link.url)).text()).toContain('Open a payment account');
    const submit = (): Promise<Response> =>
      fetch(link.url, { method: 'POST', redirect: 'manual', body: new URLSearchParams({ do: 'complete' }) });
    expect((await submit()).headers.get('location')).toBe('http://shop.test/back');
    expect((await submit()).headers.get('location')).toBe('http://shop.test/again');
    expect(await stripe.accounts.retrieve(account)).toMatchObject({
      payouts_enabled: true,
      details_submitted: true,
      capabilities: { transfers: 'active' },
    });
    expect(
      (await stripe.transfers.create({ amount: 100, currency: 'usd', destination: account })).amount,
    ).toBe(100);
  });

  it('are sent no more than there is, and send back what they still have', async () => {
    const account = await makeAccount();
    await control(running, 'onboard', { account });
    const before = await availableOf();
    await expect(
      stripe.transfers.create({ amount: before + 1, currency: 'usd', destination: account }),
    ).rejects.toMatchObject({ code: 'balance_insufficient' });
    await control(running, 'top-up', { amount: 5000, currency: 'usd' });
    const transfer = await stripe.transfers.create({
      amount: 4000,
      currency: 'usd',
      destination: account,
      metadata: { payout_id: '7' },
    });
    expect([await availableOf(), await availableOf(account)]).toEqual([before + 1000, 4000]);
    await stripe.transfers.createReversal(transfer.id, { amount: 1500 });
    expect([await availableOf(), await availableOf(account)]).toEqual([before + 2500, 2500]);
    expect(await stripe.transfers.retrieve(transfer.id)).toMatchObject({
      amount_reversed: 1500,
      reversed: false,
      metadata: { payout_id: '7' },
    });
    await expect(stripe.transfers.createReversal(transfer.id, { amount: 2501 })).rejects.toMatchObject({
      param: 'amount',
    });
  });

  it('pay out to their bank, and have the money back when the bank refuses', async () => {
    const account = await makeAccount();
    await control(running, 'onboard', { account });
    await control(running, 'top-up', { amount: 5000, currency: 'usd' });
    await stripe.transfers.create({ amount: 3000, currency: 'usd', destination: account });
    const inName = { stripeAccount: account };
    const first = await stripe.payouts.create({ amount: 1000, currency: 'usd' }, inName);
    await vi.waitFor(
      async () => expect((await stripe.payouts.retrieve(first.id, {}, inName)).status).toBe('paid'),
      5000,
    );
    const second = await stripe.payouts.create({ amount: 2000, currency: 'usd' }, inName);
    await control(running, 'payout', { payout: second.id, outcome: 'failed' });
    expect(await stripe.payouts.retrieve(second.id, {}, inName)).toMatchObject({
      status: 'failed',
      failure_code: 'account_closed',
    });
    expect(await availableOf(account)).toBe(2000);
    expect((await stripe.events.list({ type: 'payout.*' }, inName)).data.map(({ type }) => type)).toEqual(
      expect.arrayContaining(['payout.created', 'payout.paid', 'payout.failed']),
    );
    expect((await stripe.events.list({ type: 'payout.*' })).data).toEqual([]);
    await expect(stripe.balance.retrieve({}, { stripeAccount: 'acct_none' })).rejects.toMatchObject({
      code: 'account_invalid',
    });
  });
});

describe('the fee of a payment', () => {
  it('may come later than the payment, as it may with the published service', async () => {
    await control(running, 'settings', { balanceDelayMs: 1000 });
    const intent = await pay();
    const readCharge = async (): Promise<unknown> =>
      (await stripe.paymentIntents.retrieve(intent, { expand: ['latest_charge.balance_transaction'] }))
        .latest_charge;
    expect(await readCharge()).toMatchObject({ paid: true, balance_transaction: null });
    await vi.waitFor(
      async () => expect(await readCharge()).toMatchObject({ balance_transaction: { fee: 172 } }),
      5000,
    );
    await control(running, 'settings', { balanceDelayMs: 0 });
  });
});
