import { mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:http';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import Stripe from 'stripe';
import {
  startPayments,
  type RunningPayments,
  type StartOptions,
} from '#tests/fakes/payments/start-payments.ts';

/** Quick retries, so that a test of them takes no time. */
export const SWIFT = { retryBaseMs: 20, retryMaxMs: 60, maxTries: 10, answerTimeoutMs: 1000 };

/** A stand-in of its own on a free port, without a state file unless one is given. */
export function startOwn(options: Partial<StartOptions> = {}): Promise<RunningPayments> {
  return startPayments({ port: 0, timing: SWIFT, ...options });
}

/** The official SDK, turned to a stand-in. */
export function connect(running: RunningPayments, key = 'sk_test_benchleaf'): Stripe {
  return new Stripe(key, {
    host: '127.0.0.1',
    port: running.port,
    protocol: 'http',
    telemetry: false,
    maxNetworkRetries: 0,
  });
}

/** Calls the control API and gives its answer. */
export async function control(
  running: RunningPayments,
  path: string,
  input?: object,
): Promise<Record<string, unknown>> {
  const response = await fetch(
    `${running.url}/_control/${path}`,
    input ? { method: 'POST', body: JSON.stringify(input) } : {},
  );
  const answer: Record<string, unknown> = await response.json();
  if (!response.ok) throw new Error(`${path}: ${JSON.stringify(answer)}`);
  return answer;
}

/** A session over one plan at 49.00 dollars. */
export function planSession(
  change: Partial<Stripe.Checkout.SessionCreateParams> = {},
): Stripe.Checkout.SessionCreateParams {
  return {
    mode: 'payment',
    success_url: 'http://shop.test/thanks?session={CHECKOUT_SESSION_ID}',
    cancel_url: 'http://shop.test/left',
    line_items: [line('Alcove bookcase, personal licence', 4900)],
    ...change,
  };
}

/** One line with its price inside. */
export function line(
  name: string,
  unitAmount: number,
  rest: { currency?: string; quantity?: number; tax_behavior?: 'exclusive' | 'inclusive' } = {},
): Stripe.Checkout.SessionCreateParams.LineItem {
  const { currency = 'usd', quantity = 1, tax_behavior } = rest;
  return {
    quantity,
    price_data: {
      currency,
      unit_amount: unitAmount,
      product_data: { name },
      ...(tax_behavior ? { tax_behavior } : {}),
    },
  };
}

/** Sends the form of the hosted page as a browser without JavaScript would. */
export function submitPage(url: string, change: Record<string, string> = {}): Promise<Response> {
  const typed = {
    do: 'pay',
    email: 'ada@buyer.test',
    name: 'Ada Planer',
    country: 'US',
    card: '4242 4242 4242 4242',
    expiry: '12 / 34',
    cvc: '123',
    ...change,
  };
  return fetch(url, { method: 'POST', redirect: 'manual', body: new URLSearchParams(typed) });
}

export interface Received {
  body: string;
  signature: string;
  event: { id: string; type: string; account?: string };
}

/** A small endpoint that keeps what it is sent; `answer` says with which status each delivery is met. */
export async function startEndpoint(
  answer: (count: number) => number = () => 200,
): Promise<{ url: string; received: Received[]; close(): Promise<void> }> {
  const received: Received[] = [];
  const server = createServer((request, response) => {
    let body = '';
    request.setEncoding('utf8');
    request.on('data', (chunk: string) => (body += chunk));
    request.on('end', () => {
      received.push({
        body,
        signature: String(request.headers['stripe-signature']),
        event: JSON.parse(body),
      });
      response.writeHead(answer(received.length)).end();
    });
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const address = server.address();
  if (typeof address !== 'object' || !address) throw new Error('no address');
  return {
    url: `http://127.0.0.1:${address.port}/hook`,
    received,
    close: () => {
      server.closeAllConnections();
      return new Promise((resolve) => server.close(() => resolve()));
    },
  };
}

/** A folder for state files that is gone after the test. */
export function makeFolder(): { file: string; remove(): void } {
  const folder = mkdtempSync(join(tmpdir(), 'benchleaf-payments-'));
  return {
    file: join(folder, 'state.jsonl'),
    remove: () => rmSync(folder, { recursive: true, force: true }),
  };
}
