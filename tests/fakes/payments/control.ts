import * as z from 'zod';
import { completeOnboarding } from './accounts.ts';
import { bookMovement } from './charges.ts';
import type { Courier } from './deliver.ts';
import { settleDelayedPayment, startDelayedPayment } from './delayed-payment.ts';
import { closeDispute } from './disputes.ts';
import { createEndpoint } from './events.ts';
import {
  authenticateSession,
  cancelAbandoned,
  openSession,
  paySession,
  successUrlOf,
} from './pay-session.ts';
import { settlePayout } from './payouts.ts';
import { expireOverdue, expireSession } from './session-state.ts';
import { makeId, now, required, settingsOf, type World } from './world.ts';

/*
 * The control API: what tests and developers tell the stand-in, and no part of the published API. JSON in, JSON out; the calls are listed in serve.ts.
 */

interface Control {
  method: 'GET' | 'POST';
  path: string;
  run: (input: unknown) => object | Promise<object>;
}

const times = z.int().min(1).max(1000);

/** Lists the control calls over a world. */
export function createControls(world: World, courier: Courier): Control[] {
  const control = <T>(
    path: string,
    schema: z.ZodType<T>,
    run: (input: T) => object | Promise<object>,
  ): Control => ({
    method: 'POST',
    path: `/_control/${path}`,
    run: (input) => run(schema.parse(input)),
  });

  const pay = z.strictObject({
    session: z.string(),
    card: z.string().default('4242424242424242'),
    email: z.string().optional(),
    name: z.string().default('Test Buyer'),
    country: z.string().default('US'),
    authenticate: z.enum(['complete', 'fail', 'leave']).default('complete'),
    delayed: z.boolean().default(false),
  });

  return [
    control('pay', pay, ({ session: id, authenticate, delayed, ...rest }) => {
      const { session } = openSession(world, id);
      const email =
        session.customer_email ?? rest.email ?? session.customer_details?.email ?? 'buyer@example.test';
      const typed = { ...rest, email, expiry: '12 / 34', cvc: '123', hasAgreed: true, wantsNews: false };
      if (delayed) {
        const { payment_intent: intent } = startDelayedPayment(world, id, typed);
        return {
          outcome: 'delayed',
          message: null,
          session: id,
          success_url: successUrlOf(session),
          payment_intent: intent,
        };
      }
      const first = paySession(world, id, typed);
      const outcome =
        first.state === 'authenticate' && authenticate !== 'leave'
          ? authenticateSession(world, id, authenticate === 'complete')
          : first;
      return {
        outcome: outcome.state,
        message: outcome.state === 'refused' ? outcome.message : null,
        session: id,
        success_url: outcome.state === 'paid' ? successUrlOf(outcome.session) : null,
        payment_intent: world.store.get('checkout.session', id)?.payment_intent ?? null,
      };
    }),
    control(
      'settle',
      z.strictObject({ session: z.string(), outcome: z.enum(['succeeded', 'failed']) }),
      ({ session, outcome }) => settleDelayedPayment(world, session, outcome),
    ),
    control('expire', z.strictObject({ session: z.string() }), ({ session }) =>
      expireSession(world, required(world, 'checkout.session', session)),
    ),
    control('onboard', z.strictObject({ account: z.string() }), ({ account }) =>
      completeOnboarding(world, required(world, 'account', account)),
    ),
    control(
      'dispute',
      z.strictObject({ dispute: z.string(), outcome: z.enum(['won', 'lost']) }),
      ({ dispute, outcome }) => closeDispute(world, required(world, 'dispute', dispute), outcome),
    ),
    control(
      'payout',
      z.strictObject({ payout: z.string(), outcome: z.enum(['paid', 'failed']) }),
      ({ payout, outcome }) => settlePayout(world, required(world, 'payout', payout), outcome),
    ),
    control(
      'top-up',
      z.strictObject({ amount: z.int().min(1), currency: z.string().length(3).toLowerCase() }),
      ({ amount, currency }) =>
        bookMovement(world, {
          amount,
          currency,
          type: 'topup',
          category: 'topup',
          source: null,
          description: 'Top-up of the stand-in',
        }),
    ),
    control(
      'clock',
      z.union([
        z.strictObject({ advance: z.int().min(0) }),
        z.strictObject({ set: z.int() }),
        z.strictObject({ reset: z.literal(true) }),
      ]),
      (change) => {
        const real = Math.floor(Date.now() / 1000);
        const settings = settingsOf(world);
        const clockOffset =
          'advance' in change
            ? settings.clockOffset + change.advance
            : 'set' in change
              ? change.set - real
              : 0;
        world.store.put('settings', 'settings', { ...settings, clockOffset });
        expireOverdue(world);
        cancelAbandoned(world);
        return { now: now(world) };
      },
    ),
    control(
      'settings',
      z.strictObject({
        balanceDelayMs: z.int().min(0).optional(),
        payoutOutcome: z.enum(['paid', 'failed']).optional(),
      }),
      (change) => world.store.put('settings', 'settings', { ...settingsOf(world), ...change }),
    ),
    control(
      'endpoint',
      z.strictObject({
        url: z.url(),
        secret: z.string().min(8),
        enabled_events: z.array(z.string()).min(1).default(['*']),
      }),
      ({ url, secret, enabled_events: enabledEvents }) => ({
        endpoints: setEndpoint(world, url, secret, enabledEvents),
      }),
    ),
    control(
      'webhooks',
      z.strictObject({
        action: z.enum(['delay', 'drop', 'repeat', 'reorder', 'hold']),
        types: z.array(z.string()).default([]),
        times: times.nullable().default(null),
        delayMs: z.int().min(0).default(0),
        count: z.int().min(2).max(100).default(2),
      }),
      (rule) => {
        const id = makeId('rule', 8);
        return world.store.put('webhook_rule', id, { id, ...rule });
      },
    ),
    control('webhooks/clear', z.unknown(), () => {
      for (const rule of world.store.all('webhook_rule')) world.store.remove('webhook_rule', rule.id);
      return { cleared: true };
    }),
    control(
      'release',
      z.strictObject({ order: z.union([z.enum(['first', 'last']), z.array(z.string())]).default('first') }),
      async ({ order }) => {
        for (const rule of world.store.all('webhook_rule'))
          if (rule.action === 'hold') world.store.remove('webhook_rule', rule.id);
        return { released: await courier.release(order) };
      },
    ),
    control(
      'resend',
      z.strictObject({ event: z.string(), endpoint: z.string().default('') }),
      ({ event, endpoint }) => {
        required(world, 'event', event);
        courier.accept(event, endpoint);
        return { event };
      },
    ),
    control(
      'fail',
      z.strictObject({
        method: z.enum(['GET', 'POST', 'DELETE', '*']).default('*'),
        path: z.string().startsWith('/v1/'),
        times: times.default(1),
        kind: z.enum(['status', 'cut-before', 'cut-after', 'delay']).default('status'),
        status: z.int().min(400).max(599).default(500),
        error: z
          .strictObject({
            type: z.string().optional(),
            code: z.string().optional(),
            message: z.string().optional(),
          })
          .default({}),
        delayMs: z.int().min(0).max(60_000).default(0),
      }),
      (fault) => {
        const id = makeId('fault', 8);
        return world.store.put('call_fault', id, { id, ...fault });
      },
    ),
    control('fail/clear', z.unknown(), () => {
      for (const fault of world.store.all('call_fault')) world.store.remove('call_fault', fault.id);
      return { cleared: true };
    }),
    control('reset', z.unknown(), () => {
      world.store.clear();
      return { reset: true };
    }),
    { method: 'GET', path: '/_control/deliveries', run: () => ({ deliveries: world.store.all('delivery') }) },
    {
      method: 'GET',
      path: '/_control/state',
      run: () => ({
        now: now(world),
        settings: settingsOf(world),
        rules: world.store.all('webhook_rule'),
        faults: world.store.all('call_fault'),
        sessions: world.store.all('checkout.session').length,
      }),
    },
  ];
}

/** Registers an address for the platform's events and for those of connected accounts, both under one secret; says so again without harm. */
export function setEndpoint(world: World, url: string, secret: string, enabledEvents: string[]): string[] {
  for (const endpoint of world.store.all('webhook_endpoint')) {
    if (endpoint.url !== url) continue;
    const file = world.store.get('endpoint_file', endpoint.id);
    if (!file) continue;
    world.store.put('endpoint_file', endpoint.id, { ...file, secret });
    world.store.put('webhook_endpoint', endpoint.id, {
      ...endpoint,
      status: 'enabled',
      enabled_events: enabledEvents,
    });
  }
  for (const isConnect of [false, true]) {
    const isThere = world.store
      .all('webhook_endpoint')
      .some((row) => row.url === url && world.store.get('endpoint_file', row.id)?.isConnect === isConnect);
    if (!isThere) createEndpoint(world, { url, enabledEvents, isConnect, secret });
  }
  return world.store
    .all('webhook_endpoint')
    .filter((row) => row.url === url)
    .map((row) => row.id);
}
