import { auth } from './auth.ts';
import { countTry } from './allowances.ts';
import { askAuth } from './ask-auth.ts';
import { confirmEmailChange, isEmailChangeToken } from './change-email.ts';

/**
 * Confirms an address by the secret of a link: a new account's, or the one that an account moves to.
 * @throws AppError TOO_MANY, TOKEN_SPENT, CONFLICT when the new address has been taken meanwhile
 */
export async function verifyEmail(options: { token: string; headers: Headers }): Promise<void> {
  const { token, headers } = options;
  await countTry('open-link', headers, token);
  if (isEmailChangeToken(token)) await confirmEmailChange(token);
  else await askAuth(() => auth.api.verifyEmail({ query: { token } }));
}
