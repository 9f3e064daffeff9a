import { readClientAddress } from './client-address.ts';
import { takeToken, type Allowance } from './rate-limit.ts';

const MINUTE = 60;
const HOUR = 60 * MINUTE;

/**
 * How often a thing may be tried, from one address and for one account. An address may stand for a workshop or a school,
 * so it gets more; an account is held even when the tries come from many addresses.
 */
const allowances = {
  'sign-in': { address: { limit: 30, seconds: 10 * MINUTE }, account: { limit: 10, seconds: 15 * MINUTE } },
  'sign-up': { address: { limit: 20, seconds: HOUR }, account: { limit: 5, seconds: HOUR } },
  'ask-reset': { address: { limit: 20, seconds: HOUR }, account: { limit: 5, seconds: HOUR } },
  'ask-verification': { address: { limit: 20, seconds: HOUR }, account: { limit: 5, seconds: HOUR } },
  'open-link': { address: { limit: 60, seconds: HOUR }, account: { limit: 60, seconds: HOUR } },
  'check-password': { address: { limit: 60, seconds: HOUR }, account: { limit: 10, seconds: 15 * MINUTE } },
  invite: { address: { limit: 100, seconds: HOUR }, account: { limit: 40, seconds: 24 * HOUR } },
} as const satisfies Record<string, { address: Allowance; account: Allowance }>;

type Tried = keyof typeof allowances;

/** The keys under which tries are counted. */
export function tryKeys(
  tried: Tried,
  headers: Headers,
  account: string,
): { address: string; account: string } {
  return {
    address: `${tried}:address:${readClientAddress(headers)}`,
    account: `${tried}:account:${account.toLowerCase()}`,
  };
}

/**
 * Counts one try for the client's address and for the account (an e-mail, known to us or not, or an id).
 * @throws AppError TOO_MANY
 */
export async function countTry(tried: Tried, headers: Headers, account: string): Promise<void> {
  const keys = tryKeys(tried, headers, account);
  await takeToken(keys.address, allowances[tried].address);
  await takeToken(keys.account, allowances[tried].account);
}
