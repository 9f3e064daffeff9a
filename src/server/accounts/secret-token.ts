import { createHash, randomBytes } from 'node:crypto';

/** A secret for a link: 256 random bits, safe in an address. */
export function makeSecret(): string {
  return randomBytes(32).toString('base64url');
}

/** What is kept of a secret: a leaked table opens nothing. */
export function hashSecret(secret: string): string {
  return createHash('sha256').update(secret).digest('hex');
}
