import { auth } from './auth.ts';
import { countTry } from './allowances.ts';
import { askAuth } from './ask-auth.ts';

/**
 * Sets a new password by the secret of a link, which is used up. Every session of the account ends, and a move to
 * another address that is under way is called off.
 * @throws AppError TOO_MANY, TOKEN_SPENT
 */
export async function resetPassword(options: {
  token: string;
  password: string;
  headers: Headers;
}): Promise<void> {
  const { token, password, headers } = options;
  await countTry('open-link', headers, token);
  await askAuth(() => auth.api.resetPassword({ body: { token, newPassword: password } }));
}
