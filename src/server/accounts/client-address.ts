/** The header in which the front states the address of the client; it deletes what a client sends under this name. */
export const CLIENT_ADDRESS_HEADER = 'x-benchleaf-client';

/** The client's address as the front saw it. No header that a client could set is read. */
export function readClientAddress(headers: Headers): string {
  return headers.get(CLIENT_ADDRESS_HEADER) ?? 'unknown';
}
