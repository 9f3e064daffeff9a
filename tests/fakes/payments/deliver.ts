import { createHmac } from 'node:crypto';
import { covers, withPending } from './events.ts';
import type { Delivery, WebhookRule } from './tables.ts';
import { makeId, type World } from './world.ts';

export interface DeliveryTiming {
  /** Wait before the second try; it doubles from then on. */
  retryBaseMs: number;
  retryMaxMs: number;
  maxTries: number;
  answerTimeoutMs: number;
}

/** The published service retries for three days; a developer waits seconds at first, and the app may be off for hours. */
export const QUICK: DeliveryTiming = {
  retryBaseMs: 250,
  retryMaxMs: 30_000,
  maxTries: 1000,
  answerTimeoutMs: 10_000,
};

/** The published signature over a payload: `t=seconds,v1=HMAC-SHA-256 of "t.payload"`. */
function signPayload(payload: string, secret: string, atSeconds: number): string {
  const digest = createHmac('sha256', secret).update(`${atSeconds}.${payload}`, 'utf8').digest('hex');
  return `t=${atSeconds},v1=${digest}`;
}

export interface Courier {
  /** Queues an event for each endpoint that wants it. */
  accept(eventId: string, onlyEndpoint?: string): void;
  /** Lets go of what is held, one after the other, in the order given. */
  release(order: 'first' | 'last' | string[]): Promise<number>;
  stop(): Promise<void>;
}

function takeRule(world: World, type: string): WebhookRule | null {
  const rule = world.store
    .all('webhook_rule')
    .find((row) => row.types.length === 0 || row.types.some((pattern) => covers(pattern, type)));
  if (!rule) return null;
  if (rule.times !== null) {
    if (rule.times <= 1) world.store.remove('webhook_rule', rule.id);
    else world.store.put('webhook_rule', rule.id, { ...rule, times: rule.times - 1 });
  }
  return rule;
}

/** Sends events to the endpoints, tries again until one answers 2xx, and remembers over restarts what is still to be sent. */
export function startCourier(world: World, timing: DeliveryTiming): Courier {
  const running = new Set<string>();
  const stopper = new AbortController();
  let timer: NodeJS.Timeout | null = null;
  let sending: Promise<unknown>[] = [];

  function wake(delayMs: number): void {
    if (stopper.signal.aborted) return;
    if (timer) clearTimeout(timer);
    timer = setTimeout(work, Math.max(0, delayMs));
  }

  function work(): void {
    // One reading of the clock for both questions, or a delivery that falls due between them is forgotten.
    const at = Date.now();
    const waiting = world.store
      .all('delivery')
      .filter((row) => row.state === 'pending' && !running.has(row.id));
    for (const delivery of waiting) if (delivery.dueAtMs <= at) sending.push(attempt(delivery.id));
    sending = sending.slice(-200);
    const next = Math.min(...waiting.filter((row) => row.dueAtMs > at).map((row) => row.dueAtMs));
    if (Number.isFinite(next)) wake(next - at);
  }

  async function attempt(id: string): Promise<void> {
    const delivery = world.store.get('delivery', id);
    const event = delivery && world.store.get('event', delivery.event);
    const endpoint = delivery && world.store.get('webhook_endpoint', delivery.endpoint);
    const file = delivery && world.store.get('endpoint_file', delivery.endpoint);
    if (!delivery || running.has(id)) return;
    if (!event || !endpoint || !file) {
      // Its endpoint was taken away meanwhile.
      world.store.put('delivery', id, { ...delivery, state: 'failed' });
      return;
    }
    running.add(id);
    const payload = JSON.stringify(withPending(world, event), null, 2);
    const result = await post(endpoint.url, payload, file.secret);
    running.delete(id);
    const current = world.store.get('delivery', id);
    // Gone or taken back meanwhile, by a reset.
    if (!current || stopper.signal.aborted) return;
    record(current, result);
    world.store.commit();
    work();
  }

  async function post(
    url: string,
    payload: string,
    secret: string,
  ): Promise<{ status: number | null; error: string | null }> {
    try {
      const response = await fetch(url, {
        method: 'POST',
        headers: {
          'content-type': 'application/json; charset=utf-8',
          // Real time, whatever the stand-in's clock says: whoever checks the signature has a clock of its own.
          'stripe-signature': signPayload(payload, secret, Math.floor(Date.now() / 1000)),
          'user-agent': 'Benchleaf payment stand-in',
        },
        body: payload,
        redirect: 'manual',
        signal: AbortSignal.any([stopper.signal, AbortSignal.timeout(timing.answerTimeoutMs)]),
      });
      await response.body?.cancel();
      return { status: response.status, error: null };
    } catch (error) {
      return { status: null, error: error instanceof Error ? error.message : 'no answer' };
    }
  }

  function record(delivery: Delivery, result: { status: number | null; error: string | null }): void {
    const attempts = [...delivery.attempts, { at: new Date().toISOString(), ...result }].slice(-20);
    const isTaken = result.status !== null && result.status >= 200 && result.status < 300;
    const tries = delivery.tries + 1;
    const copies = isTaken ? delivery.copies - 1 : delivery.copies;
    const wait = Math.min(timing.retryBaseMs * 2 ** Math.min(tries - 1, 20), timing.retryMaxMs);
    const state = copies === 0 ? 'delivered' : tries >= timing.maxTries ? 'failed' : 'pending';
    world.store.put('delivery', delivery.id, {
      ...delivery,
      tries,
      attempts,
      copies,
      state,
      dueAtMs: Date.now() + (isTaken ? 0 : wait),
    });
  }

  function queue(event: { id: string; type: string }, endpoint: string, rule: WebhookRule | null): void {
    const id = makeId('wd');
    world.store.put('delivery', id, {
      id,
      event: event.id,
      type: event.type,
      endpoint,
      state:
        rule?.action === 'drop'
          ? 'dropped'
          : rule?.action === 'hold' || rule?.action === 'reorder'
            ? 'held'
            : 'pending',
      copies: rule?.action === 'repeat' ? rule.count : 1,
      tries: 0,
      attempts: [],
      dueAtMs: Date.now() + (rule?.action === 'delay' ? rule.delayMs : 0),
    });
    if (rule?.action === 'reorder') {
      const held = world.store.all('delivery').filter((row) => row.state === 'held');
      if (held.length >= rule.count) {
        world.store.remove('webhook_rule', rule.id);
        void release('last');
      }
    }
  }

  async function release(order: 'first' | 'last' | string[]): Promise<number> {
    const held = world.store.all('delivery').filter((row) => row.state === 'held');
    const ranks = typeof order === 'string' ? null : order;
    const ordered = ranks
      ? ranks.flatMap((wanted) => held.filter((row) => row.event === wanted || covers(wanted, row.type)))
      : order === 'last'
        ? held.toReversed()
        : held;
    for (const { id } of ordered) {
      const row = world.store.get('delivery', id);
      if (row?.state !== 'held') continue;
      world.store.put('delivery', id, { ...row, state: 'pending', dueAtMs: Date.now() });
      world.store.commit();
      // One at a time: the order of arrival is the point.
      await attempt(id);
    }
    work();
    return ordered.length;
  }

  wake(0);
  return {
    accept: (eventId, onlyEndpoint) => {
      const event = world.store.get('event', eventId);
      if (!event) return;
      for (const endpoint of world.store.all('webhook_endpoint')) {
        const isConnect = world.store.get('endpoint_file', endpoint.id)?.isConnect ?? false;
        const isWanted = endpoint.enabled_events.some((pattern) => covers(pattern, event.type));
        if (endpoint.status !== 'enabled' || isConnect !== (event.account !== undefined)) continue;
        if (onlyEndpoint === undefined ? !isWanted : onlyEndpoint !== '' && onlyEndpoint !== endpoint.id)
          continue;
        queue(event, endpoint.id, onlyEndpoint === undefined ? takeRule(world, event.type) : null);
      }
      // After the call's own answer has been written down.
      wake(0);
    },
    release,
    stop: async () => {
      stopper.abort();
      if (timer) clearTimeout(timer);
      await Promise.allSettled(sending);
    },
  };
}
