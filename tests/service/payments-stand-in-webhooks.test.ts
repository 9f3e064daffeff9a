import type Stripe from 'stripe';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import type { RunningPayments } from '#tests/fakes/payments/start-payments.ts';
import {
  connect,
  control,
  makeFolder,
  planSession,
  startEndpoint,
  startOwn,
  type Received,
} from './payments-stand-in-setup.ts';

let running: RunningPayments;
let stripe: Stripe;
const closers: (() => void | Promise<void>)[] = [];

beforeEach(async () => {
  running = await startOwn();
  stripe = connect(running);
  closers.push(() => running.close());
});
afterEach(async () => {
  for (const close of closers.splice(0).reverse()) await close();
});

async function listen(
  answer?: (count: number) => number,
): Promise<{ url: string; received: Received[]; close(): Promise<void> }> {
  const endpoint = await startEndpoint(answer);
  closers.push(endpoint.close);
  return endpoint;
}

async function pay(on = running): Promise<string> {
  const { id } = await connect(on).checkout.sessions.create(planSession());
  await control(on, 'pay', { session: id });
  return id;
}

const typesOf = (received: Received[]): string[] => received.map(({ event }) => event.type);
const until = (check: () => void | Promise<void>): Promise<void> =>
  vi.waitFor(check, { timeout: 5000, interval: 20 });
const quiet = (): Promise<void> => new Promise((resolve) => setTimeout(resolve, 200));

describe('webhooks', () => {
  it('are signed as published, so that the SDK takes them, and takes them not when changed', async () => {
    const hook = await listen();
    const endpoint = await stripe.webhookEndpoints.create({
      url: hook.url,
      enabled_events: ['checkout.session.completed'],
    });
    const id = await pay();
    await until(() => expect(hook.received).toHaveLength(1));
    const { body, signature } = hook.received[0] ?? { body: '', signature: '' };
    const secret = endpoint.secret ?? '';
    const event = stripe.webhooks.constructEvent(body, signature, secret);
    expect(event).toMatchObject({
      object: 'event',
      type: 'checkout.session.completed',
      api_version: '2026-10-28.endive',
      livemode: false,
      pending_webhooks: 1,
      data: { object: { id, payment_status: 'paid' } },
    });
    expect(() => stripe.webhooks.constructEvent(body.replace('4900', '1'), signature, secret)).toThrow();
    expect(() => stripe.webhooks.constructEvent(body, signature, 'whsec_other')).toThrow();
    await until(async () => expect((await stripe.events.retrieve(event.id)).pending_webhooks).toBe(0));
    expect((await stripe.webhookEndpoints.retrieve(endpoint.id)).secret).toBeUndefined();
  });

  it('tell of everything that a payment does, in order, and of nothing that was not asked for', async () => {
    const hook = await listen();
    await control(running, 'endpoint', {
      url: hook.url,
      secret: 'whsec_known_secret',
      enabled_events: ['charge.*', 'payment_intent.*', 'refund.created'],
    });
    const { id } = await stripe.checkout.sessions.create(planSession());
    await control(running, 'pay', { session: id, card: '4000000000000002' });
    const { payment_intent: intent } = await control(running, 'pay', { session: id });
    await stripe.refunds.create({ payment_intent: String(intent) });
    await until(() => expect(hook.received).toHaveLength(8));
    expect(typesOf(hook.received).sort()).toEqual(
      [
        'payment_intent.created',
        'charge.failed',
        'payment_intent.payment_failed',
        'charge.succeeded',
        'payment_intent.succeeded',
        'charge.updated',
        'refund.created',
        'charge.refunded',
      ].sort(),
    );
    for (const { body, signature } of hook.received)
      stripe.webhooks.constructEvent(body, signature, 'whsec_known_secret');
  });

  it('are tried again until they are taken', async () => {
    const hook = await listen((count) => (count < 4 ? 500 : 200));
    await control(running, 'endpoint', {
      url: hook.url,
      secret: 'whsec_known_secret',
      enabled_events: ['checkout.session.completed'],
    });
    await pay();
    await until(() => expect(hook.received).toHaveLength(4));
    expect(new Set(hook.received.map(({ event }) => event.id)).size).toBe(1);
    await quiet();
    expect(hook.received).toHaveLength(4);
    const { deliveries } = await control(running, 'deliveries');
    expect(deliveries).toMatchObject([
      { state: 'delivered', attempts: [{ status: 500 }, { status: 500 }, { status: 500 }, { status: 200 }] },
    ]);
  });

  it('about connected accounts name the account', async () => {
    const hook = await listen();
    await control(running, 'endpoint', {
      url: hook.url,
      secret: 'whsec_known_secret',
      enabled_events: ['account.updated'],
    });
    const { id } = await stripe.accounts.create({
      type: 'express',
      capabilities: { transfers: { requested: true } },
    });
    await control(running, 'onboard', { account: id });
    await until(() => expect(hook.received.map(({ event }) => event.account)).toEqual([id]));
  });

  it('can be dropped, repeated, delayed, and sent again', async () => {
    const hook = await listen();
    await control(running, 'endpoint', {
      url: hook.url,
      secret: 'whsec_known_secret',
      enabled_events: ['checkout.session.*'],
    });
    await control(running, 'webhooks', { action: 'drop', times: 1 });
    await pay();
    await quiet();
    expect(hook.received).toEqual([]);
    const [lost] = (await stripe.events.list({ type: 'checkout.session.completed' })).data;
    await control(running, 'resend', { event: lost?.id });
    await until(() => expect(hook.received.map(({ event }) => event.id)).toEqual([lost?.id]));
    await control(running, 'webhooks', { action: 'repeat', times: 1, count: 3 });
    await pay();
    await until(() => expect(hook.received).toHaveLength(4));
    expect(new Set(hook.received.slice(1).map(({ event }) => event.id)).size).toBe(1);
    await control(running, 'webhooks', { action: 'delay', times: 1, delayMs: 300 });
    await pay();
    await quiet();
    expect(hook.received).toHaveLength(4);
    await until(() => expect(hook.received).toHaveLength(5));
  });

  it('can be held and let go in another order', async () => {
    const hook = await listen();
    await control(running, 'endpoint', {
      url: hook.url,
      secret: 'whsec_known_secret',
      enabled_events: ['checkout.session.completed', 'charge.refunded'],
    });
    await control(running, 'webhooks', { action: 'hold' });
    const { id } = await stripe.checkout.sessions.create(planSession());
    const { payment_intent: intent } = await control(running, 'pay', { session: id });
    await stripe.refunds.create({ payment_intent: String(intent) });
    await quiet();
    expect(hook.received).toEqual([]);
    expect(await control(running, 'release', { order: 'last' })).toEqual({ released: 2 });
    expect(typesOf(hook.received)).toEqual(['charge.refunded', 'checkout.session.completed']);
    hook.received.length = 0;
    await control(running, 'webhooks', { action: 'reorder', count: 2 });
    const second = await stripe.checkout.sessions.create(planSession());
    const paid = await control(running, 'pay', { session: second.id });
    await stripe.refunds.create({ payment_intent: String(paid['payment_intent']) });
    await until(() =>
      expect(typesOf(hook.received)).toEqual(['charge.refunded', 'checkout.session.completed']),
    );
  });
});

describe('a restart from the state file', () => {
  it('loses nothing: objects, idempotency keys, and deliveries still to be made', async () => {
    const folder = makeFolder();
    closers.push(folder.remove);
    const hook = await listen();
    const first = await startOwn({ stateFile: folder.file });
    await control(first, 'endpoint', {
      url: hook.url,
      secret: 'whsec_known_secret',
      enabled_events: ['checkout.session.completed'],
    });
    await control(first, 'webhooks', { action: 'hold' });
    const session = await connect(first).checkout.sessions.create(planSession(), {
      idempotencyKey: 'order-1',
    });
    await control(first, 'pay', { session: session.id });
    const before = await connect(first).checkout.sessions.retrieve(session.id);
    await first.close();

    const second = await startOwn({ stateFile: folder.file });
    closers.push(() => second.close());
    const again = connect(second);
    const after = await again.checkout.sessions.retrieve(session.id);
    expect(JSON.parse(JSON.stringify(after))).toEqual(JSON.parse(JSON.stringify(before)));
    expect((await again.checkout.sessions.create(planSession(), { idempotencyKey: 'order-1' })).id).toBe(
      session.id,
    );
    await control(second, 'release', {});
    await until(() => expect(typesOf(hook.received)).toEqual(['checkout.session.completed']));
  });

  it('bears a last line that was only half written', async () => {
    const { appendFileSync } = await import('node:fs');
    const folder = makeFolder();
    closers.push(folder.remove);
    const first = await startOwn({ stateFile: folder.file });
    const { id } = await connect(first).customers.create({ name: 'Ada' });
    await first.close();
    appendFileSync(folder.file, '[["customer","cus_half",{"id":"cus_ha');
    const second = await startOwn({ stateFile: folder.file });
    closers.push(() => second.close());
    expect((await connect(second).customers.list()).data.map((row) => row.id)).toEqual([id]);
  });
});
