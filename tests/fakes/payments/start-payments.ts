import { createServer, type IncomingMessage, type ServerResponse } from 'node:http';
import { ZodError } from 'zod';
import { createApi } from './api.ts';
import { bookWaitingCharges } from './charges.ts';
import { createControls, setEndpoint } from './control.ts';
import { QUICK, startCourier, type Courier, type DeliveryTiming } from './deliver.ts';
import { PaymentsError } from './errors.ts';
import { renderSheet } from './html.ts';
import { answerPage } from './pages.ts';
import { cancelAbandoned } from './pay-session.ts';
import { settleWaitingPayouts } from './payouts.ts';
import { expireOverdue } from './session-state.ts';
import { openStore } from './store.ts';
import type { World } from './world.ts';

const MAX_BODY = 1_000_000;
const SWEEP_MS = 500;

export interface StartOptions {
  /** 0 for any free port. */
  port: number;
  /** Journal in which everything is kept; left out, the memory ends with the process. */
  stateFile?: string;
  /** Address under which browsers reach the pages; the server's own when left out. */
  publicUrl?: string;
  /** Registered at the start for all events, the platform's and the connected accounts'. */
  webhook?: { url: string; secret: string; enabledEvents?: string[] };
  timing?: Partial<DeliveryTiming>;
}

export interface RunningPayments {
  url: string;
  port: number;
  close(): Promise<void>;
}

async function readBody(request: IncomingMessage): Promise<string> {
  const chunks: Buffer[] = [];
  let length = 0;
  for await (const chunk of request) {
    const piece = Buffer.from(chunk);
    length += piece.length;
    if (length > MAX_BODY) throw new RangeError('body is too long');
    chunks.push(piece);
  }
  return Buffer.concat(chunks).toString('utf8');
}

function sendJson(
  response: ServerResponse,
  status: number,
  body: string,
  headers: Record<string, string> = {},
): void {
  response.writeHead(status, { 'content-type': 'application/json', ...headers });
  response.end(body);
}

function sendPage(response: ServerResponse, status: number, html: string): void {
  response.writeHead(status, {
    'content-type': 'text/html; charset=utf-8',
    'cache-control': 'no-store',
    // No form-action: browsers hold the redirect to the shop after paying against it.
    'content-security-policy':
      "default-src 'none'; style-src 'unsafe-inline'; base-uri 'none'; frame-ancestors 'none'",
    'referrer-policy': 'no-referrer',
    'x-content-type-options': 'nosniff',
  });
  response.end(html);
}

/**
 * Starts the payment stand-in on 127.0.0.1. serve.ts tells what it speaks.
 * @throws when the port is taken or the state file cannot be written
 */
export async function startPayments(options: StartOptions): Promise<RunningPayments> {
  const store = openStore(options.stateFile);
  let courier: Courier | null = null;
  const world: World = {
    store,
    publicUrl: options.publicUrl ?? '',
    account: null,
    request: { id: null, idempotency_key: null },
    onEvent: (id) => courier?.accept(id),
  };
  const api = createApi(world);
  courier = startCourier(world, { ...QUICK, ...options.timing });
  const controls = createControls(world, courier);

  async function answer(request: IncomingMessage, response: ServerResponse): Promise<void> {
    const { pathname, search } = new URL(request.url ?? '/', 'http://stand-in');
    const body = await readBody(request);
    const method = request.method ?? 'GET';
    if (pathname.startsWith('/v1/'))
      return answerApi(request, response, { method, path: pathname, query: search.slice(1), body });
    // A page open in a browser on this machine must not steer the stand-in.
    const isForeign = request.headers.origin !== undefined && request.headers.origin !== world.publicUrl;
    if (pathname.startsWith('/_control/')) {
      return isForeign
        ? sendJson(response, 403, '{"error":"foreign origin"}')
        : answerControl(response, method, pathname, body);
    }
    if (pathname === '/_health') return sendJson(response, 200, '{"ok":true}');
    const page =
      method === 'GET' || method === 'POST'
        ? answerPage(world, pathname, method === 'POST' ? new URLSearchParams(body) : null)
        : null;
    store.commit();
    if (!page)
      return sendPage(
        response,
        404,
        renderSheet('There is no such page', '<p>Go back to the shop and start again.</p>'),
      );
    if ('html' in page) return sendPage(response, page.status, page.html);
    response.writeHead(303, { location: page.location, 'cache-control': 'no-store' });
    response.end();
  }

  async function answerApi(
    request: IncomingMessage,
    response: ServerResponse,
    call: { method: string; path: string; query: string; body: string },
  ): Promise<void> {
    expireOverdue(world);
    const result = await api.answer({
      ...call,
      header: (name) => {
        const value = request.headers[name];
        return Array.isArray(value) ? value[0] : value;
      },
    });
    if (result.isCut) request.socket.destroy();
    else sendJson(response, result.status, result.body, result.headers);
  }

  async function answerControl(
    response: ServerResponse,
    method: string,
    path: string,
    body: string,
  ): Promise<void> {
    const found = controls.find((control) => control.method === method && control.path === path);
    if (!found) return sendJson(response, 404, '{"error":"no such control call"}');
    try {
      const input: unknown = body === '' ? {} : JSON.parse(body);
      const result = await found.run(input);
      store.commit();
      sendJson(response, 200, JSON.stringify(result, null, 2));
    } catch (error) {
      store.commit();
      if (error instanceof PaymentsError)
        return sendJson(response, error.status, JSON.stringify({ error: error.body.message }));
      if (error instanceof ZodError || error instanceof SyntaxError)
        return sendJson(response, 400, JSON.stringify({ error: error.message }));
      throw error;
    }
  }

  const server = createServer((request, response) => {
    answer(request, response).catch((error: unknown) => {
      const isTooLong = error instanceof RangeError || error instanceof URIError;
      if (!isTooLong) console.error('payment stand-in:', error);
      if (response.headersSent) response.destroy();
      else
        sendJson(
          response,
          isTooLong ? 413 : 500,
          JSON.stringify({ error: { type: 'api_error', message: 'The stand-in failed.' } }),
        );
    });
  });
  await new Promise<void>((resolve, reject) => {
    server.once('error', reject);
    server.listen(options.port, '127.0.0.1', resolve);
  });
  const address = server.address();
  const port = typeof address === 'object' && address ? address.port : options.port;
  const url = `http://127.0.0.1:${port}`;
  world.publicUrl ||= url;
  if (options.webhook) {
    setEndpoint(world, options.webhook.url, options.webhook.secret, options.webhook.enabledEvents ?? ['*']);
    store.commit();
  }

  const sweep = setInterval(() => {
    expireOverdue(world);
    cancelAbandoned(world);
    bookWaitingCharges(world);
    settleWaitingPayouts(world);
    store.commit();
  }, SWEEP_MS);

  return {
    url,
    port,
    close: async () => {
      clearInterval(sweep);
      await courier.stop();
      server.closeAllConnections();
      await new Promise<void>((resolve) => server.close(() => resolve()));
    },
  };
}
