import type { IncomingMessage } from 'node:http';
import type { Refusal } from './check-request.ts';
import { UNSAFE_METHODS } from './check-request.ts';

const KB = 1_000;
const MB = 1_000_000;

/** Largest body that each kind of address takes; the first that fits counts. */
const LIMITS: readonly { path: RegExp; bytes: number }[] = [
  { path: /^\/api\/office\/plans\/[^/]+\/pictures$/, bytes: 13 * MB },
  { path: /^\/api\/office\/plans\/[^/]+\/draft$/, bytes: 1.7 * MB },
  { path: /^\/api\/webhooks\//, bytes: 1 * MB },
  { path: /^\//, bytes: 200 * KB },
];

/** The most bytes that a request to this path may carry. */
export function bodyLimit(path: string): number {
  return LIMITS.find((limit) => limit.path.test(path))?.bytes ?? 0;
}

/** Refuses a body by what it says of itself. */
export function checkDeclaredBody(request: IncomingMessage, path: string): Refusal | null {
  const declared = request.headers['content-length'];
  const hasBody = declared !== undefined || request.headers['transfer-encoding'] !== undefined;
  if (!hasBody) return null;
  if (!UNSAFE_METHODS.has(request.method ?? '') && Number(declared ?? 1) > 0) {
    return { status: 400, reason: 'a request of this kind carries no body' };
  }
  return Number(declared ?? 0) > bodyLimit(path) ? { status: 413, reason: 'the body is too large' } : null;
}

/**
 * Watches a body that does not say its size, or lies about it. Astro reads the request as a stream, so a body that grows too large is cut off
 * by destroying the request; whatever was being done with it fails and changes nothing.
 */
export function watchBody(request: IncomingMessage, path: string, onTooLarge: () => void): void {
  const limit = bodyLimit(path);
  let seen = 0;
  const push = request.push.bind(request);
  request.push = (chunk: Uint8Array | null, encoding?: BufferEncoding) => {
    if (chunk) {
      seen += chunk.length;
      if (seen > limit) {
        onTooLarge();
        return false;
      }
    }
    return push(chunk, encoding);
  };
}
