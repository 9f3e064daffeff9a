import Stripe from 'stripe';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { parseForm } from '#tests/fakes/payments/form.ts';
import type { RunningPayments } from '#tests/fakes/payments/start-payments.ts';
import { connect, control, line, planSession, startOwn } from './payments-stand-in-setup.ts';

let running: RunningPayments;
let stripe: Stripe;
beforeAll(async () => {
  running = await startOwn();
  stripe = connect(running);
});
afterAll(() => running.close());

/** Calls the API without the SDK, which would not let everything through. */
async function raw(
  method: string,
  path: string,
  body = '',
  headers: Record<string, string> = {},
): Promise<{ status: number; headers: Headers; error: Record<string, unknown> }> {
  const response = await fetch(`${running.url}${path}`, {
    method,
    headers: {
      authorization: 'Bearer sk_test_benchleaf',
      'content-type': 'application/x-www-form-urlencoded',
      ...headers,
    },
    ...(method === 'GET' ? {} : { body }),
  });
  const answer: { error?: Record<string, unknown> } = await response.json();
  return { status: response.status, headers: response.headers, error: answer.error ?? {} };
}

describe('refusals in the published shape', () => {
  const session =
    'mode=payment&success_url=http%3A%2F%2Fshop.test%2F&line_items[0][quantity]=1&line_items[0][price_data][currency]=usd&line_items[0][price_data][product_data][name]=A';
  it.each([
    ['an unknown parameter', '/v1/customers', 'nme=Ada', 'parameter_unknown', 'nme'],
    [
      'an unknown parameter deep inside',
      '/v1/checkout/sessions',
      `${session}&line_items[0][price_data][amount]=5`,
      'parameter_unknown',
      'line_items[0][price_data][amount]',
    ],
    ['a missing parameter', '/v1/refunds', '', 'parameter_missing', 'payment_intent'],
    [
      'a missing parameter deep inside',
      '/v1/checkout/sessions',
      session,
      'parameter_missing',
      'line_items[0][price_data][unit_amount]',
    ],
    [
      'a word for a number',
      '/v1/checkout/sessions',
      `${session}&line_items[0][price_data][unit_amount]=ten`,
      'parameter_invalid_integer',
      'line_items[0][price_data][unit_amount]',
    ],
    [
      'an empty value',
      '/v1/promotion_codes',
      'promotion[type]=coupon&promotion[coupon]=',
      'parameter_invalid_empty',
      'promotion[coupon]',
    ],
    [
      'an address that is none',
      '/v1/webhook_endpoints',
      'url=nowhere&enabled_events[0]=*',
      'url_invalid',
      'url',
    ],
    ['an object that does not exist', '/v1/refunds', 'charge=ch_none', 'resource_missing', 'charge'],
    [
      'an amount below the least',
      '/v1/payment_intents',
      'amount=49&currency=usd',
      'amount_too_small',
      'amount',
    ],
  ])('names %s', async (_, path, body, code, param) => {
    const { status, error, headers } = await raw('POST', path, body);
    expect(status).toBe(400);
    expect(error).toMatchObject({ type: 'invalid_request_error', code, param });
    expect(error['message']).toBeTypeOf('string');
    expect(error['doc_url']).toBe(`https://stripe.com/docs/error-codes/${code.replaceAll('_', '-')}`);
    expect(headers.get('request-id')).toMatch(/^req_/);
  });

  it('knows no object and no call that is not there (404)', async () => {
    expect(await raw('GET', '/v1/payment_intents/pi_none')).toMatchObject({
      status: 404,
      error: { code: 'resource_missing', param: 'intent' },
    });
    expect(await raw('GET', '/v1/subscriptions')).toMatchObject({
      status: 404,
      error: { type: 'invalid_request_error' },
    });
  });

  it('takes no missing, wrong or live key (401)', async () => {
    for (const authorization of ['', 'Bearer nonsense', 'Bearer sk_live_123456789']) {
      expect(await raw('GET', '/v1/balance', '', { authorization })).toMatchObject({
        status: 401,
        error: { type: 'invalid_request_error' },
      });
    }
    await expect(connect(running, 'sk_bad').balance.retrieve()).rejects.toBeInstanceOf(
      Stripe.errors.StripeAuthenticationError,
    );
  });

  it('refuses choices that are not listed, and prices in two currencies', async () => {
    expect(
      await raw(
        'POST',
        '/v1/checkout/sessions',
        `${session}&line_items[0][price_data][unit_amount]=900&locale=xx`,
      ),
    ).toMatchObject({ status: 400, error: { param: 'locale' } });
    await expect(
      stripe.checkout.sessions.create(
        planSession({ line_items: [line('A', 900), line('B', 900, { currency: 'eur' })] }),
      ),
    ).rejects.toMatchObject({ param: 'line_items' });
  });

  it('leaves nothing behind of a call that was refused', async () => {
    const before = await stripe.products.list({ limit: 100 });
    await expect(
      stripe.checkout.sessions.create(planSession({ line_items: [line('Too cheap', 20)] })),
    ).rejects.toMatchObject({ code: 'amount_too_small' });
    expect((await stripe.products.list({ limit: 100 })).data).toHaveLength(before.data.length);
  });

  it('declines a card by its token with a card error (402)', async () => {
    const declined = stripe.paymentIntents.create({
      amount: 500,
      currency: 'usd',
      confirm: true,
      payment_method: 'pm_card_chargeDeclined',
    });
    await expect(declined).rejects.toMatchObject({
      type: 'StripeCardError',
      code: 'card_declined',
      statusCode: 402,
      decline_code: 'generic_decline',
    });
  });
});

describe('idempotency keys', () => {
  it('give the same answer again for the same call, and say so', async () => {
    const first = await stripe.customers.create({ email: 'ada@buyer.test' }, { idempotencyKey: 'one' });
    const again = await stripe.customers.create({ email: 'ada@buyer.test' }, { idempotencyKey: 'one' });
    expect(again.id).toBe(first.id);
    expect(first.lastResponse.headers['idempotent-replayed']).toBeUndefined();
    expect(again.lastResponse.headers['idempotent-replayed']).toBe('true');
    expect((await stripe.customers.list({ email: 'ada@buyer.test' })).data).toHaveLength(1);
  });

  it('are refused for other parameters', async () => {
    await stripe.customers.create({ name: 'A' }, { idempotencyKey: 'two' });
    const other = stripe.customers.create({ name: 'B' }, { idempotencyKey: 'two' });
    await expect(other).rejects.toBeInstanceOf(Stripe.errors.StripeIdempotencyError);
  });

  it('may be used again after parameters that were wrong in form', async () => {
    expect((await raw('POST', '/v1/customers', 'nme=A', { 'idempotency-key': 'three' })).status).toBe(400);
    expect((await raw('POST', '/v1/customers', 'name=A', { 'idempotency-key': 'three' })).status).toBe(200);
  });

  it('are busy (409) while the first call is still going on', async () => {
    await control(running, 'fail', { path: '/v1/customers', kind: 'delay', delayMs: 300 });
    const slow = raw('POST', '/v1/customers', 'name=Slow', { 'idempotency-key': 'four' });
    await new Promise((resolve) => setTimeout(resolve, 100));
    expect(await raw('POST', '/v1/customers', 'name=Slow', { 'idempotency-key': 'four' })).toMatchObject({
      status: 409,
      error: { type: 'idempotency_error' },
    });
    expect((await slow).status).toBe(200);
  });
});

describe('lists', () => {
  it('come newest first in pages, forwards and backwards', async () => {
    const ids: string[] = [];
    for (let count = 0; count < 5; count += 1)
      ids.unshift((await stripe.products.create({ name: `Paged ${count}` })).id);
    const first = await stripe.products.list({ limit: 2 });
    expect([first.has_more, first.data.map(({ id }) => id)]).toEqual([true, ids.slice(0, 2)]);
    const second = await stripe.products.list({ limit: 2, starting_after: ids[1] ?? '' });
    expect(second.data.map(({ id }) => id)).toEqual(ids.slice(2, 4));
    const back = await stripe.products.list({ limit: 2, ending_before: ids[3] ?? '' });
    expect([back.has_more, back.data.map(({ id }) => id)]).toEqual([true, ids.slice(1, 3)]);
    const all = await stripe.products.list({ limit: 2 }).autoPagingToArray({ limit: 1000 });
    expect(all.slice(0, 5).map(({ id }) => id)).toEqual(ids);
    expect(await raw('GET', '/v1/products?limit=101')).toMatchObject({
      status: 400,
      error: { param: 'limit' },
    });
  });

  it('expand what their rows name, and refuse what cannot be expanded', async () => {
    const product = await stripe.products.create({ name: 'Expanded' });
    await stripe.prices.create({ product: product.id, currency: 'usd', unit_amount: 700 });
    const prices = await stripe.prices.list({ product: product.id, expand: ['data.product'] });
    expect(prices.data[0]?.product).toMatchObject({ object: 'product', name: 'Expanded' });
    await expect(stripe.prices.list({ expand: ['data.colour'] })).rejects.toThrow(/cannot be expanded/);
  });
});

describe('faults that were asked for', () => {
  it('answer with the status and error told, so many times', async () => {
    await control(running, 'fail', {
      method: 'GET',
      path: '/v1/balance',
      times: 2,
      status: 503,
      error: { message: 'Down for a while' },
    });
    for (let count = 0; count < 2; count += 1) {
      await expect(stripe.balance.retrieve()).rejects.toMatchObject({
        type: 'StripeAPIError',
        statusCode: 503,
        message: 'Down for a while',
      });
    }
    expect((await stripe.balance.retrieve()).object).toBe('balance');
  });

  // The SDK meets a cut line with one more try of its own, whatever its settings, so each cut is asked for twice.
  it('cut the line before the call has its effect, or after it', async () => {
    const create = (): Promise<unknown> =>
      stripe.customers.create({ email: 'cut@buyer.test' }, { idempotencyKey: 'cut' });
    const count = async (): Promise<number> =>
      (await stripe.customers.list({ email: 'cut@buyer.test' })).data.length;
    await control(running, 'fail', { method: 'POST', path: '/v1/customers', kind: 'cut-before', times: 2 });
    await expect(create()).rejects.toBeInstanceOf(Stripe.errors.StripeConnectionError);
    expect(await count()).toBe(0);
    await control(running, 'fail', { method: 'POST', path: '/v1/customers', kind: 'cut-after', times: 2 });
    await expect(create()).rejects.toBeInstanceOf(Stripe.errors.StripeConnectionError);
    expect(await count()).toBe(1);
    await create();
    expect(await count()).toBe(1);
  });
});

describe('the control API', () => {
  it('is closed to pages of other sites, and refuses what it does not know', async () => {
    const call = (path: string, headers: Record<string, string> = {}): Promise<Response> =>
      fetch(`${running.url}/_control/${path}`, { method: 'POST', body: '{"advance":0,"much":1}', headers });
    expect((await call('clock', { origin: 'http://evil.test' })).status).toBe(403);
    expect((await call('clock')).status).toBe(400);
    expect((await call('nothing')).status).toBe(404);
  });
});

describe('the bracket notation', () => {
  it('reads nested objects and lists, and takes __proto__ for a key like any other', () => {
    expect(parseForm('a=1&b[c]=2&d[0]=x&d[1]=y&e[0][f]=%5B&g[]=p&g[]=q')).toEqual({
      a: '1',
      b: { c: '2' },
      d: ['x', 'y'],
      e: [{ f: '[' }],
      g: ['p', 'q'],
    });
    const hostile = parseForm('__proto__[polluted]=1');
    expect(Object.keys(hostile)).toEqual(['__proto__']);
    expect(Object.hasOwn(Object.prototype, 'polluted')).toBe(false);
  });

  it('is refused when it is nested without end', async () => {
    expect((await raw('POST', '/v1/customers', `a${'[b]'.repeat(500)}=1`)).status).toBe(400);
  });
});
