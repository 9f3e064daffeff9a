import type { IncomingMessage } from 'node:http';

/** Why a request is turned away before Astro sees it. */
export interface Refusal {
  status: 400 | 403 | 404 | 405 | 413 | 421 | 431;
  reason: string;
}

export interface FrontRules {
  /** The only host that we answer to, as in the Host header, e.g. `benchleaf.test:4400`. */
  host: string;
  /** The only origin that may send anything, e.g. `https://benchleaf.test`. */
  origin: string;
}

const METHODS = new Set(['GET', 'HEAD', 'POST', 'PUT', 'DELETE']);
export const UNSAFE_METHODS: ReadonlySet<string> = new Set(['POST', 'PUT', 'DELETE']);

/** The one address that others call from outside; it trusts a signature and no origin. */
export const WEBHOOK_PATH = '/api/webhooks/payments';

/** Parts of Astro that we do not use and that have had holes; they answer as if they were not there. */
const CLOSED = /^\/_(server-islands|image|actions|render-endpoint)(\/|$)/i;

const MAX_URL = 4096;
const MAX_QUERY_KEYS = 100;

/** Everything that could make the path that is checked differ from the path that is served. */
const CROOKED_PATH = /\/\/|\\|%2f|%5c|%00|%25|%2e|;|\/\.\.?(\/|$)|[^\x21-\x7e]/i;

/** Checks the path and the query as they came over the wire. */
export function checkPath(rawUrl: string): Refusal | null {
  if (!rawUrl.startsWith('/')) return { status: 400, reason: 'the address must begin with a slash' };
  if (rawUrl.length > MAX_URL) return { status: 431, reason: 'the address is too long' };
  const [path = '', query = ''] = rawUrl.split('?', 2);
  if (CROOKED_PATH.test(path)) return { status: 400, reason: 'the path is not in its plain form' };
  if (CLOSED.test(path)) return { status: 404, reason: 'there is nothing here' };
  if (query.split('&').length > MAX_QUERY_KEYS) return { status: 400, reason: 'too many query parameters' };
  return null;
}

/** How often a header came; two of a kind that must be single are a trick. */
function countHeader(request: IncomingMessage, name: string): number {
  return request.rawHeaders.filter((header, index) => index % 2 === 0 && header.toLowerCase() === name)
    .length;
}

/** Checks the Host, which must be ours and stand there once. */
export function checkHost(request: IncomingMessage, rules: FrontRules): Refusal | null {
  const isOurs =
    countHeader(request, 'host') === 1 && request.headers.host?.toLowerCase() === rules.host.toLowerCase();
  return isOurs ? null : { status: 421, reason: 'this host is not served here' };
}

/**
 * Checks that whatever changes something was sent by a page of ours: the Origin must be ours, and a browser that says where the request was made
 * must say so too. The webhook alone has no page.
 */
export function checkOrigin(request: IncomingMessage, path: string, rules: FrontRules): Refusal | null {
  if (!UNSAFE_METHODS.has(request.method ?? '')) return null;
  if (path === WEBHOOK_PATH) return null;
  const refused: Refusal = { status: 403, reason: 'this was not sent from a page of ours' };
  if (countHeader(request, 'origin') !== 1 || request.headers.origin !== rules.origin) return refused;
  const site = request.headers['sec-fetch-site'];
  return site === undefined || site === 'same-origin' ? null : refused;
}

/** All checks that need no body, in the order in which they cost least. */
export function checkRequest(request: IncomingMessage, rules: FrontRules): Refusal | null {
  if (!METHODS.has(request.method ?? '')) return { status: 405, reason: 'this method is not used here' };
  const rawUrl = request.url ?? '';
  const crooked = checkPath(rawUrl);
  if (crooked) return crooked;
  return checkHost(request, rules) ?? checkOrigin(request, rawUrl.split('?', 1)[0] ?? '', rules);
}
