import type Stripe from 'stripe';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { RunningPayments } from '#tests/fakes/payments/start-payments.ts';
import { connect, control, line, planSession, startOwn, submitPage } from './payments-stand-in-setup.ts';

let running: RunningPayments;
let stripe: Stripe;
beforeAll(async () => {
  running = await startOwn();
  stripe = connect(running);
});
afterAll(() => running.close());

async function open(
  change: Partial<Stripe.Checkout.SessionCreateParams> = {},
): Promise<{ id: string; url: string }> {
  const { id, url } = await stripe.checkout.sessions.create(planSession(change));
  if (!url) throw new Error('a session without an address');
  return { id, url };
}

describe('the hosted payment page', () => {
  it('takes a good card, goes to the success address with the id filled in, and tells the whole payment', async () => {
    const session = await open({
      client_reference_id: 'order-7',
      payment_intent_data: { metadata: { order_id: 'order-7' } },
    });
    const answer = await submitPage(session.url);
    expect(answer.status).toBe(303);
    expect(answer.headers.get('location')).toBe(`http://shop.test/thanks?session=${session.id}`);
    const paid = await stripe.checkout.sessions.retrieve(session.id, {
      expand: ['payment_intent.latest_charge.balance_transaction', 'line_items'],
    });
    expect(paid).toMatchObject({
      status: 'complete',
      payment_status: 'paid',
      url: null,
      client_reference_id: 'order-7',
      amount_total: 4900,
      customer_details: { email: 'ada@buyer.test', name: 'Ada Planer', address: { country: 'US' } },
      payment_intent: {
        status: 'succeeded',
        amount_received: 4900,
        metadata: { order_id: 'order-7' },
        // 2.9 % of 49.00 is 1.421, and 0.30 on top: 1.72.
        latest_charge: { paid: true, balance_transaction: { amount: 4900, fee: 172, net: 4728 } },
      },
    });
    expect(paid.line_items?.data[0]).toMatchObject({
      description: 'Alcove bookcase, personal licence',
      amount_total: 4900,
    });
  });

  it('says at its head that no money moves, shows the lines as text, and leads back to the shop', async () => {
    const { url } = await open({ line_items: [line('Bench <script>alert(1)</script>', 4900)] });
    const html = await (await fetch(url)).text();
    expect(html).toContain('<title>Payment stand-in: no real money moves</title>');
    expect(html).toContain('Bench &lt;script&gt;');
    expect(html).not.toContain('<script');
    expect(html).toContain('href="http://shop.test/left"');
  });

  it.each([
    ['4000 0000 0000 0002', 'Your card was declined.', 'card_declined', 'generic_decline'],
    ['4000000000009995', 'Your card has insufficient funds.', 'card_declined', 'insufficient_funds'],
    ['4000000000000069', 'Your card has expired.', 'expired_card', undefined],
  ])(
    'shows why the card %s was declined, keeps what was typed, and takes another card',
    async (card, message, code, declineCode) => {
      const session = await open();
      const declined = await submitPage(session.url, { card, name: 'Bo "Router" Lee' });
      const html = await declined.text();
      expect(html).toContain(message.replace("'", '&#39;'));
      expect(html).toContain('value="Bo &quot;Router&quot; Lee"');
      expect(html).toContain(`value="${card}"`);
      const open_ = await stripe.checkout.sessions.retrieve(session.id, { expand: ['payment_intent'] });
      expect(open_).toMatchObject({ status: 'open', payment_status: 'unpaid' });
      expect(open_.payment_intent).toMatchObject({
        status: 'requires_payment_method',
        last_payment_error: { code, type: 'card_error' },
      });
      if (declineCode)
        expect(open_.payment_intent).toMatchObject({ last_payment_error: { decline_code: declineCode } });
      expect((await submitPage(session.url)).status).toBe(303);
      const paid = await stripe.checkout.sessions.retrieve(session.id, { expand: ['payment_intent'] });
      expect(paid).toMatchObject({
        status: 'complete',
        payment_intent: { status: 'succeeded', last_payment_error: null },
      });
    },
  );

  it('sends a card that asks for authentication to a second page, where it can be completed or failed', async () => {
    const session = await open();
    const card = '4000002500003155';
    const first = await submitPage(session.url, { card });
    expect(first.headers.get('location')).toBe(`/c/pay/${session.id}/authenticate`);
    const page = `${session.url}/authenticate`;
    expect(await (await fetch(page)).text()).toContain('Complete authentication');
    const answer = (value: string): Promise<Response> =>
      fetch(page, { method: 'POST', redirect: 'manual', body: new URLSearchParams({ answer: value }) });
    const failed = await (await answer('fail')).text();
    expect(failed).toContain('unable to authenticate');
    expect(failed).toContain('value="Ada Planer"');
    expect((await stripe.checkout.sessions.retrieve(session.id)).status).toBe('open');
    await submitPage(session.url, { card });
    expect((await answer('complete')).headers.get('location')).toBe(
      `http://shop.test/thanks?session=${session.id}`,
    );
    expect((await stripe.checkout.sessions.retrieve(session.id)).payment_status).toBe('paid');
  });

  it('takes no card that is not a published test card, and no unlikely expiry', async () => {
    const { url } = await open();
    expect(await (await submitPage(url, { card: '4111111111111111' })).text()).toContain(
      'Only the published test cards',
    );
    expect(await (await submitPage(url, { expiry: '13/34' })).text()).toContain('Write the expiry');
    expect(await (await submitPage(url, { expiry: '01/20' })).text()).toContain('in the past');
    expect(await (await submitPage(url, { cvc: '1' })).text()).toContain('security code');
  });

  it('says that a session is complete or has expired, and charges nothing then', async () => {
    const paid = await open();
    await submitPage(paid.url);
    expect(await (await submitPage(paid.url)).text()).toContain('This payment is complete');
    expect(await (await fetch(paid.url)).text()).toContain(
      `href="http://shop.test/thanks?session=${paid.id}"`,
    );
    const over = await open();
    await stripe.checkout.sessions.expire(over.id);
    expect(await (await fetch(over.url)).text()).toContain('This payment has expired');
    expect(await (await submitPage(over.url)).text()).toContain('This payment has expired');
    expect((await stripe.checkout.sessions.retrieve(over.id)).payment_status).toBe('unpaid');
    expect((await fetch(`${running.url}/c/pay/cs_test_none`)).status).toBe(404);
  });

  it('holds the buyer to the terms where the session asks for consent', async () => {
    const session = await open({ consent_collection: { terms_of_service: 'required' } });
    expect(await (await submitPage(session.url)).text()).toContain('Agree to the terms');
    await submitPage(session.url, { agreed: 'yes' });
    expect((await stripe.checkout.sessions.retrieve(session.id)).consent).toMatchObject({
      terms_of_service: 'accepted',
    });
  });

  it('keeps the e-mail address of the session, and makes a customer when asked to', async () => {
    const session = await open({ customer_email: 'eve@buyer.test', customer_creation: 'always' });
    await submitPage(session.url, { email: 'other@buyer.test' });
    const paid = await stripe.checkout.sessions.retrieve(session.id, { expand: ['customer'] });
    expect(paid.customer_details?.email).toBe('eve@buyer.test');
    expect(paid.customer).toMatchObject({ object: 'customer', email: 'eve@buyer.test' });
  });
});

describe('totals', () => {
  it('adds tax on top of exclusive prices and takes it out of inclusive ones, by the country chosen', async () => {
    const session = await open({
      automatic_tax: { enabled: true },
      line_items: [
        line('Plan A', 1000, { tax_behavior: 'exclusive', quantity: 2 }),
        line('Plan B', 1190, { tax_behavior: 'inclusive' }),
      ],
    });
    expect(await stripe.checkout.sessions.retrieve(session.id)).toMatchObject({
      amount_total: 3190,
      automatic_tax: { status: 'requires_location_inputs' },
    });
    const page = await (await submitPage(session.url, { do: 'update', country: 'DE' })).text();
    // 19 % of 20.00 is 3.80 on top; 11.90 contains 1.90.
    expect(page).toContain('USD 35.70');
    await submitPage(session.url, { country: 'DE' });
    const paid = await stripe.checkout.sessions.retrieve(session.id, {
      expand: ['total_details.breakdown', 'line_items'],
    });
    expect(paid).toMatchObject({
      amount_subtotal: 3190,
      amount_total: 3570,
      automatic_tax: { status: 'complete' },
    });
    expect(paid.total_details).toMatchObject({ amount_tax: 570, amount_discount: 0 });
    expect(paid.total_details?.breakdown?.taxes.map(({ amount, rate }) => [amount, rate.inclusive])).toEqual([
      [380, false],
      [190, true],
    ]);
    expect(
      paid.line_items?.data.map((item) => [item.amount_subtotal, item.amount_tax, item.amount_total]),
    ).toEqual([
      [2000, 380, 2380],
      [1190, 190, 1190],
    ]);
  });

  it('shares a discount out over the lines to the last unit, before tax', async () => {
    const coupon = await stripe.coupons.create({ percent_off: 33.3, name: 'Friends' });
    const session = await stripe.checkout.sessions.create(
      planSession({
        discounts: [{ coupon: coupon.id }],
        line_items: [line('A', 999), line('B', 999), line('C', 1001)],
        expand: ['line_items'],
      }),
    );
    // 33.3 % of 29.99 is 9.98667.
    expect(session).toMatchObject({
      amount_subtotal: 2999,
      amount_total: 2000,
      total_details: { amount_discount: 999 },
    });
    const parts = session.line_items?.data.map((item) => item.amount_discount) ?? [];
    expect(parts.reduce((sum, part) => sum + part, 0)).toBe(999);
    expect(Math.max(...parts) - Math.min(...parts)).toBeLessThanOrEqual(1);
  });

  it('counts whole yen, without minor units', async () => {
    const session = await open({
      automatic_tax: { enabled: true },
      line_items: [line('図面', 1250, { currency: 'jpy' })],
    });
    const html = await (await submitPage(session.url, { do: 'update', country: 'JP' })).text();
    expect(html).toContain('JPY 1,375');
    await submitPage(session.url, { country: 'JP' });
    expect(await stripe.checkout.sessions.retrieve(session.id)).toMatchObject({
      currency: 'jpy',
      amount_total: 1375,
    });
  });

  it('completes an order of nothing without a card', async () => {
    const coupon = await stripe.coupons.create({ percent_off: 100 });
    const session = await open({ discounts: [{ coupon: coupon.id }] });
    expect(await (await fetch(session.url)).text()).not.toContain('Card number');
    await submitPage(session.url, { card: '', expiry: '', cvc: '' });
    expect(await stripe.checkout.sessions.retrieve(session.id)).toMatchObject({
      status: 'complete',
      payment_status: 'no_payment_required',
      payment_intent: null,
      amount_total: 0,
    });
  });
});

describe('promotion codes', () => {
  it('are typed on the page, whatever their case, and can be taken off again', async () => {
    const coupon = await stripe.coupons.create({ amount_off: 900, currency: 'usd' });
    await stripe.promotionCodes.create({ promotion: { type: 'coupon', coupon: coupon.id }, code: 'SPRING' });
    const session = await open({ allow_promotion_codes: true });
    const withCode = await (await submitPage(session.url, { do: 'apply-code', code: ' spring ' })).text();
    expect(withCode).toContain('SPRING (USD 9.00 off)');
    expect(withCode).toContain('USD 40.00');
    expect(withCode).toContain('value="Ada Planer"');
    expect(await (await submitPage(session.url, { do: 'remove-code' })).text()).toContain('Pay USD 49.00');
    expect(await (await submitPage(session.url, { do: 'apply-code', code: 'AUTUMN' })).text()).toContain(
      'does not exist',
    );
    await submitPage(session.url, { do: 'apply-code', code: 'SPRING' });
    await submitPage(session.url);
    const paid = await stripe.checkout.sessions.retrieve(session.id, {
      expand: ['discounts.promotion_code', 'total_details.breakdown'],
    });
    expect(paid).toMatchObject({
      amount_total: 4000,
      discounts: [{ promotion_code: { code: 'SPRING', times_redeemed: 1 } }],
    });
    expect(paid.total_details?.breakdown?.discounts[0]?.amount).toBe(900);
  });

  it('end with their last use, for sessions opened before it too', async () => {
    const coupon = await stripe.coupons.create({ percent_off: 50 });
    const code = await stripe.promotionCodes.create({
      promotion: { type: 'coupon', coupon: coupon.id },
      code: 'ONCE',
      max_redemptions: 1,
    });
    const [first, second] = [
      await open({ discounts: [{ promotion_code: code.id }] }),
      await open({ discounts: [{ promotion_code: code.id }] }),
    ];
    expect((await submitPage(first.url)).status).toBe(303);
    expect(await (await submitPage(second.url)).text()).toContain('used up');
    await expect(
      stripe.checkout.sessions.create(planSession({ discounts: [{ promotion_code: code.id }] })),
    ).rejects.toMatchObject({
      type: 'StripeInvalidRequestError',
    });
    expect((await stripe.promotionCodes.retrieve(code.id)).active).toBe(false);
  });
});

describe('a delayed payment', () => {
  it.each([
    ['succeeded', 'paid'],
    ['failed', 'unpaid'],
  ] as const)('completes the session unpaid, and tells later that it has %s', async (outcome, status) => {
    const { id } = await open();
    await control(running, 'pay', { session: id, delayed: true });
    const waiting = await stripe.checkout.sessions.retrieve(id, { expand: ['payment_intent'] });
    expect(waiting).toMatchObject({
      status: 'complete',
      payment_status: 'unpaid',
      payment_intent: { status: 'processing' },
    });
    await control(running, 'settle', { session: id, outcome });
    expect((await stripe.checkout.sessions.retrieve(id)).payment_status).toBe(status);
    const [told] = (await stripe.events.list({ type: 'checkout.session.*', limit: 1 })).data;
    expect(told).toMatchObject({
      type: `checkout.session.async_payment_${outcome}`,
      data: { object: { id, payment_status: status } },
    });
  });
});

describe('expiry', () => {
  it('comes when the clock passes it, and not before', async () => {
    const session = await open();
    await control(running, 'clock', { advance: 24 * 3600 - 60 });
    expect((await stripe.checkout.sessions.retrieve(session.id)).status).toBe('open');
    await control(running, 'clock', { advance: 61 });
    expect(await stripe.checkout.sessions.retrieve(session.id)).toMatchObject({
      status: 'expired',
      url: null,
    });
    await control(running, 'clock', { reset: true });
    await expect(stripe.checkout.sessions.expire(session.id)).rejects.toThrow(
      /Only Checkout Sessions with a status in \["open"\]/,
    );
  });

  it('must lie between half an hour and a day ahead', async () => {
    const inSeconds = (seconds: number): number => Math.floor(Date.now() / 1000) + seconds;
    for (const expiresAt of [inSeconds(600), inSeconds(90_000)]) {
      await expect(
        stripe.checkout.sessions.create(planSession({ expires_at: expiresAt })),
      ).rejects.toMatchObject({ param: 'expires_at' });
    }
    expect((await stripe.checkout.sessions.create(planSession({ expires_at: inSeconds(1805) }))).status).toBe(
      'open',
    );
  });
});
