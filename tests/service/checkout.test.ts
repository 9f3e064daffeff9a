import { randomUUID } from 'node:crypto';
import Stripe from 'stripe';
import { describe, expect, it } from 'vitest';
import {
  Code,
  CodeUse,
  InboxEvent,
  LedgerTransaction,
  Licence,
  LicenceOffer,
  Order,
  OutboxEmail,
} from '#db/models/index.ts';
import { VISITOR } from '#server/accounts/actor.ts';
import { getOrder } from '#server/checkout/get-order.ts';
import { receiveEvent } from '#server/checkout/receive-event.ts';
import { refundOrder } from '#server/checkout/refund-order.ts';
import { settleOrder } from '#server/checkout/settle-order.ts';
import { settleRefunds } from '#server/checkout/settle-refunds.ts';
import { startCheckout, type CheckoutRequest } from '#server/checkout/start-checkout.ts';
import { workInboxEvent } from '#server/checkout/work-inbox-event.ts';
import { requestCopy } from '#server/copies/request-copy.ts';
import { actAs, codeOf, makePerson } from './people.ts';
import { control, makeBuyer, makeShopPlan, payOrder } from './shop-floor.ts';

const ask = (actor: CheckoutRequest['actor'], offerId: string, change: Partial<CheckoutRequest> = {}) =>
  startCheckout({
    actor,
    offerId,
    fitId: null,
    code: '',
    sourceSlug: null,
    requestKey: randomUUID(),
    hasConsented: true,
    ...change,
  });

async function buy(priceMinor = 2400) {
  const shop = await makeShopPlan(priceMinor);
  const buyer = await makeBuyer();
  const { orderId } = await ask(buyer, shop.offer.id);
  const session = await payOrder(orderId);
  await settleOrder(session);
  const order = await Order.findByPk(orderId, { rejectOnEmpty: true });
  const licence = await Licence.findOne({
    where: { userId: buyer.id, planId: shop.plan.id },
    rejectOnEmpty: true,
  });
  return { ...shop, buyer, order, licence, session };
}

describe('starting to buy', () => {
  it('takes the price from the database and opens a page for just that', async () => {
    const { offer } = await makeShopPlan(3150);
    const { orderId, url } = await ask(await makeBuyer(), offer.id);
    const order = await Order.findByPk(orderId, { rejectOnEmpty: true });
    expect([order.totalMinor, order.currency, order.state]).toEqual([3150, 'EUR', 'pending']);
    expect(await (await fetch(url)).text()).toContain('31.50');
  });

  it('makes one order and one payment page of ten clicks at once', async () => {
    const { offer } = await makeShopPlan();
    const buyer = await makeBuyer();
    const requestKey = randomUUID();
    const answers = await Promise.all(Array.from({ length: 10 }, () => ask(buyer, offer.id, { requestKey })));
    expect(new Set(answers.map((answer) => answer.orderId)).size).toBe(1);
    expect(new Set(answers.map((answer) => answer.url)).size).toBe(1);
    expect(await Order.count({ where: { userId: buyer.id } })).toBe(1);
  });

  it('refuses a visitor, an unconfirmed address, and a purchase without consent', async () => {
    const { offer } = await makeShopPlan();
    const stranger = await actAs(await makePerson());
    expect(await codeOf(ask(VISITOR, offer.id))).toBe('SIGN_IN_REQUIRED');
    expect(await codeOf(ask({ ...stranger, isVerified: false }, offer.id))).toBe('EMAIL_UNVERIFIED');
    expect(await codeOf(ask(stranger, offer.id, { hasConsented: false }))).toBe('BAD_INPUT');
  });

  it('refuses an offer that no longer stands and a licence that is owned already', async () => {
    const { offer, buyer } = await buy();
    expect(await codeOf(ask(buyer, offer.id))).toBe('ALREADY_OWNED');
    await LicenceOffer.update({ isActive: false }, { where: { id: offer.id } });
    expect(await codeOf(ask(await makeBuyer(), offer.id))).toBe('NOT_FOR_SALE');
  });

  it('keeps the order when the payment service is cut off, and a second try pays once', async () => {
    const { offer } = await makeShopPlan();
    const buyer = await makeBuyer();
    const requestKey = randomUUID();
    await control('fail', { method: 'POST', path: '/v1/checkout/sessions', kind: 'cut-after', times: 4 });
    try {
      expect(await codeOf(ask(buyer, offer.id, { requestKey }))).toBe('PAYMENT_UNAVAILABLE');
    } finally {
      await control('fail/clear');
    }
    const { orderId } = await ask(buyer, offer.id, { requestKey });
    expect(await settleOrder(await payOrder(orderId))).toBe('paid');
    expect(await Order.count({ where: { userId: buyer.id } })).toBe(1);
    expect(await Licence.count({ where: { userId: buyer.id } })).toBe(1);
  });
});

describe('a code', () => {
  const makeCode = (imprintId: string, change: Partial<Code> = {}) =>
    Code.create({
      id: randomUUID(),
      imprintId,
      code: `C-${randomUUID().slice(0, 8).toUpperCase()}`,
      percentOff: 25,
      ...change,
    });

  it('with five uses left is taken by exactly five of twenty buyers at once', async () => {
    const { offer, imprint } = await makeShopPlan();
    const code = await makeCode(imprint.id, { maxUses: 5 });
    const buyers = await Promise.all(Array.from({ length: 20 }, makeBuyer));
    const outcomes = await Promise.allSettled(
      buyers.map((buyer) => ask(buyer, offer.id, { code: code.code })),
    );
    expect(outcomes.filter((outcome) => outcome.status === 'fulfilled').length).toBe(5);
    await code.reload();
    expect(code.used).toBe(5);
  });

  it('takes its part off the price and is given back when the order runs out', async () => {
    const { offer, imprint } = await makeShopPlan(2401);
    const code = await makeCode(imprint.id);
    const { orderId } = await ask(await makeBuyer(), offer.id, { code: code.code.toLowerCase() });
    const order = await Order.findByPk(orderId, { rejectOnEmpty: true });
    // A quarter of 24.01 is 6.0025; a whole cent less for the buyer is never taken.
    expect([order.discountMinor, order.totalMinor]).toEqual([600, 1801]);
    await control('expire', { session: order.checkoutSessionId });
    expect(await settleOrder(order.checkoutSessionId ?? '')).toBe('expired');
    expect((await code.reload()).used).toBe(0);
    expect((await CodeUse.findOne({ where: { orderId } }))?.state).toBe('released');
  });

  it.each([
    ['has run out', { endsAt: new Date(Date.now() - 1000) }],
    ['does not hold yet', { startsAt: new Date(Date.now() + 60_000) }],
    ['was stopped', { isActive: false }],
  ])('that %s is refused', async (_, change) => {
    const { offer, imprint } = await makeShopPlan();
    const code = await makeCode(imprint.id, change);
    expect(await codeOf(ask(await makeBuyer(), offer.id, { code: code.code }))).toBe('CODE_REFUSED');
  });

  it('of another imprint is refused', async () => {
    const code = await makeCode((await makeShopPlan()).imprint.id);
    expect(await codeOf(ask(await makeBuyer(), (await makeShopPlan()).offer.id, { code: code.code }))).toBe(
      'CODE_REFUSED',
    );
  });
});

describe('a payment', () => {
  it('settled ten times at once gives one licence, one receipt and one sale in the ledger', async () => {
    const { offer, plan } = await makeShopPlan();
    const buyer = await makeBuyer();
    const { orderId } = await ask(buyer, offer.id);
    const session = await payOrder(orderId);
    const outcomes = await Promise.all(Array.from({ length: 10 }, () => settleOrder(session)));
    expect(outcomes.filter((outcome) => outcome === 'paid').length).toBe(1);
    expect(await Licence.count({ where: { userId: buyer.id, planId: plan.id } })).toBe(1);
    expect(await OutboxEmail.count({ where: { kind: 'receipt', toAddress: buyer.email } })).toBe(1);
    const order = await Order.findByPk(orderId, { include: ['lines'], rejectOnEmpty: true });
    expect(
      await LedgerTransaction.count({ where: { reference: `sale:${order.lines?.[0]?.id ?? ''}` } }),
    ).toBe(1);
    // 2.9 % of 24.00 and 0.30.
    expect(order.feeMinor).toBe(100);
  });

  it('that is not made gives nothing, also to somebody who opens the page of thanks', async () => {
    const { offer } = await makeShopPlan();
    const buyer = await makeBuyer();
    const { orderId } = await ask(buyer, offer.id);
    expect((await getOrder(buyer, orderId)).state).toBe('pending');
    expect(await Licence.count({ where: { userId: buyer.id } })).toBe(0);
    expect(await codeOf(getOrder(await makeBuyer(), orderId))).toBe('NOT_FOUND');
  });

  it('of another amount than was ordered gives no licence', async () => {
    const { offer } = await makeShopPlan();
    const buyer = await makeBuyer();
    const { orderId } = await ask(buyer, offer.id);
    const session = await payOrder(orderId);
    await Order.update({ subtotalMinor: 9900, totalMinor: 9900 }, { where: { id: orderId } });
    expect(await settleOrder(session)).toBe('refused');
    expect(await Licence.count({ where: { userId: buyer.id } })).toBe(0);
  });

  it('for nothing is a licence too, and moves no money', async () => {
    const { licence, order } = await buy(0);
    expect([licence.state, order.state, order.feeMinor]).toEqual(['active', 'paid', 0]);
  });
});

describe('money that goes back', () => {
  it('in full ends the licence, and no copy can be ordered any more', async () => {
    const { buyer, order, licence, owner } = await buy();
    await refundOrder({
      actor: await actAs(owner),
      orderId: order.id,
      reason: 'test',
      requestKey: randomUUID(),
    });
    expect([(await licence.reload()).state, (await order.reload()).state, order.refundedMinor]).toEqual([
      'refunded',
      'refunded',
      2400,
    ]);
    const copy = requestCopy({
      actor: buyer,
      licenceId: licence.id,
      fit: { values: {}, measured: {}, units: 'mm' },
      paper: 'a4',
    });
    expect(await codeOf(copy)).toBe('LICENCE_ENDED');
  });

  it('in part leaves the licence, and is never more than was paid', async () => {
    const { order, licence, owner } = await buy();
    const actor = await actAs(owner);
    await refundOrder({ actor, orderId: order.id, amountMinor: 1000, reason: '', requestKey: randomUUID() });
    expect([(await licence.reload()).state, (await order.reload()).state]).toEqual([
      'active',
      'partly_refunded',
    ]);
    expect(
      await codeOf(
        refundOrder({ actor, orderId: order.id, amountMinor: 1401, reason: '', requestKey: randomUUID() }),
      ),
    ).toBe('BAD_INPUT');
  });

  it('is not a stranger’s to give', async () => {
    const { order } = await buy();
    expect(
      await codeOf(
        refundOrder({ actor: await makeBuyer(), orderId: order.id, reason: '', requestKey: randomUUID() }),
      ),
    ).toBe('NOT_FOUND');
  });

  it('before the payment was seen ends in the same state as after it', async () => {
    const { offer } = await makeShopPlan();
    const buyer = await makeBuyer();
    const { orderId } = await ask(buyer, offer.id);
    const session = await payOrder(orderId);
    const stripe = new Stripe('sk_test_service', {
      host: '127.0.0.1',
      port: new URL(process.env['STRIPE_API_BASE'] ?? '').port,
      protocol: 'http',
      telemetry: false,
    });
    const intent = (await stripe.checkout.sessions.retrieve(session)).payment_intent;
    await stripe.refunds.create({ payment_intent: String(intent) });
    await settleRefunds(String(intent));
    await settleOrder(session);
    const order = await Order.findByPk(orderId, { rejectOnEmpty: true });
    expect(order.state).toBe('refunded');
    expect((await Licence.findOne({ where: { userId: buyer.id } }))?.state).toBe('refunded');
  });
});

describe('an event of the payment service', () => {
  const secret = process.env['STRIPE_WEBHOOK_SECRET'] ?? '';
  const makeEvent = (objectId = 'cs_unknown') =>
    JSON.stringify({
      id: `evt_${randomUUID()}`,
      object: 'event',
      type: 'checkout.session.completed',
      data: { object: { id: objectId } },
    });
  const sign = (payload: string, at = Date.now(), key = secret) =>
    Stripe.webhooks.generateTestHeaderString({ payload, secret: key, timestamp: Math.floor(at / 1000) });

  it.each([
    ['without a signature', () => null],
    ['with another secret', (payload: string) => sign(payload, Date.now(), 'whsec_other')],
    ['whose text was changed', (payload: string) => sign(`${payload} `)],
    ['six minutes old', (payload: string) => sign(payload, Date.now() - 360_000)],
    ['from ten minutes in the future', (payload: string) => sign(payload, Date.now() + 600_000)],
  ])('%s is refused and not kept', async (_, signature) => {
    const payload = makeEvent();
    const before = await InboxEvent.count();
    expect(await codeOf(receiveEvent(payload, signature(payload)))).toBe('BAD_INPUT');
    expect(await InboxEvent.count()).toBe(before);
  });

  it('that comes twenty times at once is kept once, and its work is done once', async () => {
    const { offer } = await makeShopPlan();
    const buyer = await makeBuyer();
    const { orderId } = await ask(buyer, offer.id);
    const payload = makeEvent(await payOrder(orderId));
    await Promise.all(Array.from({ length: 20 }, () => receiveEvent(payload, sign(payload))));
    const { id } = JSON.parse(payload) as { id: string };
    expect(await InboxEvent.count({ where: { id } })).toBe(1);
    await workInboxEvent(id);
    await workInboxEvent(id);
    expect(await Licence.count({ where: { userId: buyer.id } })).toBe(1);
    expect((await InboxEvent.findByPk(id))?.attempts).toBe(1);
  });
});
