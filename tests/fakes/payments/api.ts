import { createHash } from 'node:crypto';
import { accountRoutes } from './accounts.ts';
import { balanceRoutes } from './balance.ts';
import { catalogueRoutes } from './catalogue.ts';
import { chargeRoutes } from './charge-routes.ts';
import { customerRoutes } from './customers.ts';
import { discountRoutes } from './discounts.ts';
import { disputeRoutes } from './disputes.ts';
import { PaymentsError, refuse, type ErrorBody } from './errors.ts';
import { eventRoutes } from './events.ts';
import { expandAnswer } from './expand.ts';
import { takeFault } from './faults.ts';
import { parseForm } from './form.ts';
import { intentRoutes } from './payment-intent-routes.ts';
import { payoutRoutes } from './payouts.ts';
import { refundRoutes } from './refunds.ts';
import { matchPath, type Route } from './route.ts';
import { sessionRoutes } from './sessions.ts';
import { transferRoutes } from './transfers.ts';
import { makeId, requireAccount, type World } from './world.ts';

const ROUTES: readonly Route[] = [
  ...customerRoutes,
  ...catalogueRoutes,
  ...discountRoutes,
  ...sessionRoutes,
  ...intentRoutes,
  ...chargeRoutes,
  ...refundRoutes,
  ...disputeRoutes,
  ...accountRoutes,
  ...transferRoutes,
  ...payoutRoutes,
  ...balanceRoutes,
  ...eventRoutes,
];

interface ApiCall {
  method: string;
  path: string;
  query: string;
  body: string;
  header: (name: string) => string | undefined;
}

interface ApiAnswer {
  status: number;
  body: string;
  headers: Record<string, string>;
  /** The line is to be cut instead of answering. */
  isCut: boolean;
}

/** Takes calls of the published API. */
interface Api {
  answer(call: ApiCall): Promise<ApiAnswer>;
}

function authenticate(call: ApiCall): void {
  const header = call.header('authorization') ?? '';
  const key = header.startsWith('Basic ')
    ? Buffer.from(header.slice(6), 'base64').toString('utf8').split(':')[0]
    : header.replace(/^Bearer\s+/, '');
  if (!key) {
    throw new PaymentsError(
      401,
      {
        type: 'invalid_request_error',
        message:
          "You did not provide an API key. You need to provide your API key in the Authorization header, using Bearer auth (e.g. 'Authorization: Bearer YOUR_SECRET_KEY').",
      },
      false,
    );
  }
  // A live key must never be sent to a stand-in, so it is refused like a wrong one.
  if (!/^(?:sk|rk)_test_\w{3,}$/.test(key)) {
    throw new PaymentsError(
      401,
      {
        type: 'invalid_request_error',
        message: `Invalid API Key provided: ${key.slice(0, 8)}****${key.slice(-4)}`,
      },
      false,
    );
  }
}

const print = (value: object): string => `${JSON.stringify(value, null, 2)}\n`;

function run(world: World, call: ApiCall): object {
  const isRead = call.method === 'GET';
  const input = parse(isRead || call.method === 'DELETE' ? call.query || call.body : call.body || call.query);
  for (const route of ROUTES) {
    if (route.method !== call.method) continue;
    const ids = matchPath(route.path, call.path);
    if (!ids) continue;
    const answer = route.run(world, input, ids);
    const paths = input['expand'];
    return expandAnswer(world, answer, Array.isArray(paths) ? paths.map(String) : []);
  }
  throw new PaymentsError(
    404,
    {
      type: 'invalid_request_error',
      message: `Unrecognized request URL (${call.method}: ${call.path}). The stand-in speaks only the part of the published API that is used here.`,
    },
    false,
  );
}

function parse(text: string): ReturnType<typeof parseForm> {
  try {
    return parseForm(text);
  } catch (error) {
    if (error instanceof RangeError) return refuse(`The request cannot be read: ${error.message}.`);
    throw error;
  }
}

function errorAnswer(error: PaymentsError, requestId: string): { status: number; body: string } {
  const body: ErrorBody = {
    ...error.body,
    request_log_url: `https://dashboard.stripe.com/test/logs/${requestId}`,
  };
  return { status: error.status, body: print({ error: body }) };
}

const pause = (ms: number): Promise<void> => new Promise((resolve) => setTimeout(resolve, ms));

/** The published API over a world: keys, parameters, idempotency, expansion, errors; and the faults that were asked for. */
export function createApi(world: World): Api {
  const inProgress = new Set<string>();

  function execute(
    call: ApiCall,
    account: string | null,
    requestId: string,
    key: string | undefined,
  ): { status: number; body: string; isKept: boolean } {
    world.store.commit();
    world.account = account;
    world.request = { id: requestId, idempotency_key: key ?? null };
    try {
      if (account) requireAccount(world, account);
      return { status: 200, body: print(run(world, call)), isKept: true };
    } catch (error) {
      // A refused call leaves nothing behind; a declined card does.
      if (!(error instanceof PaymentsError && error.body.type === 'card_error')) world.store.rollback();
      if (!(error instanceof PaymentsError)) throw error;
      return { ...errorAnswer(error, requestId), isKept: error.isKept };
    } finally {
      world.account = null;
      world.request = { id: null, idempotency_key: null };
    }
  }

  async function answer(call: ApiCall): Promise<ApiAnswer> {
    const requestId = makeId('req', 14);
    const headers: Record<string, string> = {
      'request-id': requestId,
      'stripe-version': call.header('stripe-version') ?? '',
    };
    const refused = (error: PaymentsError): ApiAnswer => ({
      ...errorAnswer(error, requestId),
      headers,
      isCut: false,
    });
    const account = call.header('stripe-account') ?? null;
    if (account) headers['stripe-account'] = account;
    const key = call.method === 'POST' ? call.header('idempotency-key') : undefined;
    if (key !== undefined) headers['idempotency-key'] = key;
    const slot = key === undefined ? null : `${account ?? ''}:${key}`;
    try {
      authenticate(call);
      if (key !== undefined && (key === '' || key.length > 255))
        refuse('Idempotency keys may be at most 255 characters long.');
    } catch (error) {
      if (error instanceof PaymentsError) return refused(error);
      throw error;
    }
    if (slot !== null && inProgress.has(slot)) {
      return refused(
        new PaymentsError(409, {
          type: 'idempotency_error',
          code: 'idempotency_key_in_use',
          message: `There is currently another in-progress request using this Idempotent Key (that probably means you submitted twice, and the other request is still going through): ${key}. Please try again later.`,
        }),
      );
    }
    if (slot !== null) inProgress.add(slot);
    try {
      const fault = takeFault(world, call.method, call.path);
      if (fault?.kind === 'delay') await pause(fault.delayMs);
      if (fault?.kind === 'cut-before') return { status: 0, body: '', headers, isCut: true };
      if (fault?.kind === 'status') {
        return refused(
          new PaymentsError(fault.status, {
            type:
              fault.error.type === 'card_error' || fault.error.type === 'invalid_request_error'
                ? fault.error.type
                : 'api_error',
            message: fault.error.message ?? 'The stand-in was told to fail this call.',
            code: fault.error.code,
          }),
        );
      }
      const result = respond(call, account, requestId, key, slot, headers);
      return { ...result, headers, isCut: fault?.kind === 'cut-after' };
    } finally {
      if (slot !== null) inProgress.delete(slot);
      world.store.commit();
    }
  }

  function respond(
    call: ApiCall,
    account: string | null,
    requestId: string,
    key: string | undefined,
    slot: string | null,
    headers: Record<string, string>,
  ): { status: number; body: string } {
    if (slot === null) return execute(call, account, requestId, key);
    const fingerprint = createHash('sha256')
      .update(`${call.path}\n${call.query}\n${call.body}`)
      .digest('hex');
    const kept = world.store.get('kept_answer', slot);
    if (!kept) {
      const { isKept, ...result } = execute(call, account, requestId, key);
      if (isKept) world.store.put('kept_answer', slot, { fingerprint, ...result, requestId });
      return result;
    }
    if (kept.fingerprint !== fingerprint) {
      return errorAnswer(
        new PaymentsError(400, {
          type: 'idempotency_error',
          message: `Keys for idempotent requests can only be used with the same parameters they were first used with. Try using a key other than '${key}' if you meant to execute a different request.`,
        }),
        requestId,
      );
    }
    headers['idempotent-replayed'] = 'true';
    headers['original-request'] = kept.requestId;
    return { status: kept.status, body: kept.body };
  }

  return { answer };
}
