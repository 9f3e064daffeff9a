import { existsSync, readFileSync } from 'node:fs';
import { resolve } from 'node:path';
import type Stripe from 'stripe';
import { afterAll, beforeAll, expect, it } from 'vitest';
import type { RunningPayments } from '#tests/fakes/payments/start-payments.ts';
import { connect, control, planSession, startEndpoint, startOwn } from './payments-stand-in-setup.ts';

// Example objects as the payment service publishes them: repository stripe/openapi, openapi/fixtures3.json, commit f6c2a48f (2026-08-21), MIT licence.
const FIXTURES = resolve(import.meta.dirname, '../../../shared/reference/payment/fixtures.json');

type Fixture = Record<string, unknown>;
const isObject = (value: unknown): value is Fixture =>
  typeof value === 'object' && value !== null && !Array.isArray(value);
const kindOf = (value: unknown): string =>
  value === null ? 'null' : Array.isArray(value) ? 'array' : typeof value;

/** Published keys that an object lacks, and values of another kind. A null on either side is no difference: what may be null is checked by the SDK's types. */
function differences(published: Fixture, ours: Fixture, at = ''): string[] {
  return Object.entries(published).flatMap(([key, value]) => {
    const path = `${at}${key}`;
    if (!(key in ours)) return [`${path} is missing`];
    const own = ours[key];
    if (value === null || own === null) return [];
    if (kindOf(value) !== kindOf(own)) return [`${path} is ${kindOf(own)}, published as ${kindOf(value)}`];
    // What is free in its keys is not compared further.
    if (!isObject(value) || !isObject(own) || key === 'metadata' || path.endsWith('data.object')) return [];
    return differences(value, own, `${path}.`);
  });
}

let running: RunningPayments;
let stripe: Stripe;
let hook: Awaited<ReturnType<typeof startEndpoint>>;
beforeAll(async () => {
  running = await startOwn();
  stripe = connect(running);
  hook = await startEndpoint();
});
afterAll(async () => {
  await running.close();
  await hook.close();
});

/** The answer as it went over the wire: the SDK turns decimals into objects of its own. */
async function wire(path: string): Promise<Fixture> {
  const response = await fetch(`${running.url}/v1/${path}`, {
    headers: { authorization: 'Bearer sk_test_benchleaf' },
  });
  const answer: Fixture = await response.json();
  if (!response.ok) throw new Error(JSON.stringify(answer));
  return answer;
}

/** One object of each kind, as the stand-in answers with it. */
async function makeOneOfEach(): Promise<Record<string, Fixture>> {
  const endpoint = await stripe.webhookEndpoints.create({ url: hook.url, enabled_events: ['*'] });
  const coupon = await stripe.coupons.create({
    percent_off: 25.5,
    duration: 'repeating',
    duration_in_months: 3,
  });
  const promotion = await stripe.promotionCodes.create({ promotion: { type: 'coupon', coupon: coupon.id } });
  const customer = await stripe.customers.create({ email: 'ada@buyer.test' });
  const session = await stripe.checkout.sessions.create(
    planSession({
      customer: customer.id,
      automatic_tax: { enabled: true },
      discounts: [{ promotion_code: promotion.id }],
    }),
  );
  const openSession = await wire(`checkout/sessions/${session.id}`);
  const paid = await control(running, 'pay', {
    session: session.id,
    country: 'DE',
    card: '4000000000000259',
  });
  const intent = await stripe.paymentIntents.retrieve(String(paid['payment_intent']), {
    expand: ['latest_charge'],
  });
  const charge = typeof intent.latest_charge === 'object' ? intent.latest_charge : null;
  const dispute = (await stripe.disputes.list({ charge: charge?.id ?? '' })).data[0];
  const other = await stripe.paymentIntents.create({
    amount: 2000,
    currency: 'usd',
    confirm: true,
    payment_method: 'pm_card_visa',
  });
  const refund = await stripe.refunds.create({ payment_intent: other.id, amount: 100 });
  const account = await stripe.accounts.create({
    type: 'express',
    capabilities: { transfers: { requested: true }, card_payments: { requested: true } },
  });
  await control(running, 'onboard', { account: account.id });
  const link = await stripe.accountLinks.create({
    account: account.id,
    type: 'account_onboarding',
    refresh_url: 'http://shop.test/',
    return_url: 'http://shop.test/',
  });
  const login = await stripe.accounts.createLoginLink(account.id);
  await control(running, 'top-up', { amount: 9000, currency: 'usd' });
  const transfer = await stripe.transfers.create({ amount: 1100, currency: 'usd', destination: account.id });
  const reversal = await stripe.transfers.createReversal(transfer.id, { amount: 100 });
  const payout = await stripe.payouts.create({ amount: 500, currency: 'usd' });
  const lines = await wire(`checkout/sessions/${session.id}/line_items`);
  const taxed = await wire(`checkout/sessions/${session.id}?expand[]=total_details.breakdown`);
  const item = Array.isArray(lines['data']) ? lines['data'][0] : undefined;
  const rates: unknown = JSON.parse(JSON.stringify(taxed))['total_details'].breakdown.taxes[0].rate;
  const event = (await stripe.events.list({ limit: 1 })).data[0];
  const plain = (value: unknown): Fixture => JSON.parse(JSON.stringify(value));
  return {
    account: await wire(`accounts/${account.id}`),
    account_link: plain(link),
    balance: await wire('balance'),
    balance_transaction: await wire(`balance_transactions/${String(charge?.balance_transaction)}`),
    charge: await wire(`charges/${charge?.id}?expand[]=refunds`),
    'checkout.session': openSession,
    coupon: await wire(`coupons/${coupon.id}`),
    customer: await wire(`customers/${customer.id}`),
    dispute: await wire(`disputes/${dispute?.id}`),
    event: await wire(`events/${event?.id}`),
    item: plain(item),
    login_link: plain(login),
    payment_intent: await wire(`payment_intents/${intent.id}`),
    payout: await wire(`payouts/${payout.id}`),
    price: plain(plain(item)['price']),
    product: await wire(`products/${String(plain(plain(item)['price'])['product'])}`),
    promotion_code: await wire(`promotion_codes/${promotion.id}`),
    refund: await wire(`refunds/${refund.id}`),
    tax_rate: plain(rates),
    transfer: await wire(`transfers/${transfer.id}`),
    transfer_reversal: plain(reversal),
    webhook_endpoint: await wire(`webhook_endpoints/${endpoint.id}`),
  };
}

it('answers with objects that carry every published key with a value of the published kind', async () => {
  const ours = await makeOneOfEach();
  if (!existsSync(FIXTURES)) {
    console.log(
      `The published example objects are not at ../shared/reference/payment; the comparison with them is left out.`,
    );
    return;
  }
  const published: Record<string, Fixture> = JSON.parse(readFileSync(FIXTURES, 'utf8'));
  const faults = Object.entries(ours).flatMap(([name, object]) =>
    differences(published[name] ?? { [`no fixture ${name}`]: 0 }, object, `${name}: `),
  );
  expect(faults).toEqual([]);
});
