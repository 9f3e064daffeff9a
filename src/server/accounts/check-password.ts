import { auth } from './auth.ts';
import { countTry, tryKeys } from './allowances.ts';
import { askAuth } from './ask-auth.ts';
import { forgetTokens } from './rate-limit.ts';

/**
 * Asks for the password once more before something that a stolen session must not be able to do.
 * @throws AppError TOO_MANY, SIGN_IN_REQUIRED, BAD_INPUT on the named field
 */
export async function checkPassword(options: {
  userId: string;
  password: string;
  headers: Headers;
  /** The form field to mark when the password is wrong. */
  field: string;
}): Promise<void> {
  const { userId, password, headers, field } = options;
  await countTry('check-password', headers, userId);
  await askAuth(() => auth.api.verifyPassword({ body: { password }, headers }), field);
  await forgetTokens(tryKeys('check-password', headers, userId).account);
}
