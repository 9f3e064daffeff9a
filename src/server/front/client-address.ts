import type { IncomingMessage } from 'node:http';
import { CLIENT_ADDRESS_HEADER } from '../accounts/client-address.ts';

/** Headers by which a proxy speaks; from anybody else they are lies. */
const PROXY_HEADERS = [
  'x-forwarded-for',
  'x-forwarded-host',
  'x-forwarded-proto',
  'x-forwarded-port',
  'x-real-ip',
  'forwarded',
];
/** Headers that only the front may write. */
const OWN_HEADERS = [CLIENT_ADDRESS_HEADER, 'x-benchleaf-request'];

const plain = (address: string) => address.replace(/^::ffff:/, '');

/**
 * States whose request this is, for rate limits and logs, and deletes what a client may have said about it. Behind a configured proxy the
 * last address that the proxy added counts; otherwise the socket's.
 */
export function stateClient(
  request: IncomingMessage,
  requestId: string,
  trustedProxies: readonly string[],
): string {
  const peer = plain(request.socket.remoteAddress ?? 'unknown');
  const forwarded = String(request.headers['x-forwarded-for'] ?? '')
    .split(',')
    .map((part) => plain(part.trim()))
    .filter(Boolean);
  let address = peer;
  if (trustedProxies.includes(peer)) {
    // From the right, the first address that is not a proxy of ours.
    address = forwarded.reverse().find((each) => !trustedProxies.includes(each)) ?? peer;
  }
  request.headers = Object.fromEntries(
    Object.entries(request.headers).filter(
      ([name]) => !PROXY_HEADERS.includes(name) && !OWN_HEADERS.includes(name),
    ),
  );
  request.rawHeaders = request.rawHeaders.filter((_, index, raw) => {
    const name = (raw[index - (index % 2)] ?? '').toLowerCase();
    return !PROXY_HEADERS.includes(name) && !OWN_HEADERS.includes(name);
  });
  const state = (name: string, value: string) => {
    request.headers[name] = value;
    request.rawHeaders.push(name, value);
  };
  state(CLIENT_ADDRESS_HEADER, address);
  state('x-benchleaf-request', requestId);
  return address;
}
