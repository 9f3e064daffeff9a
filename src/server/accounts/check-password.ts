import { auth } from './auth.ts';
import { countTry, tryKeys } from './allowances.ts';
import { askAuth } from './ask-auth.ts';
import { forgetTokens } from './rate-limit.ts';

/**
 * Asks for the password once more before something that a stolen session must not be able to do.
 * @throws AppError TOO_MANY, SIGN_IN_REQUIRED, BAD_INPUT on `currentPassword`
 */
export async function checkPassword(options: {
  userId: string;
  password: string;
  headers: Headers;
}): Promise<void> {
  const { userId, password, headers } = options;
  await countTry('check-password', headers, userId);
  await askAuth(() => auth.api.verifyPassword({ body: { password }, headers }));
  await forgetTokens(tryKeys('check-password', headers, userId).account);
}
