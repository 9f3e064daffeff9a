import { createHash } from 'node:crypto';

/** Names a text, so that a proof can say which it was made of. */
export function hashSource(source: string): string {
  return createHash('sha256').update(source).digest('hex');
}
