import { auth } from './auth.ts';
import { countTry } from './allowances.ts';
import { askAuth } from './ask-auth.ts';

/**
 * Sends a link to set a new password, if the address has an account. The caller learns nothing of that.
 * @throws AppError TOO_MANY
 */
export async function requestPasswordReset(options: { email: string; headers: Headers }): Promise<void> {
  await countTry('ask-reset', options.headers, options.email);
  await askAuth(() => auth.api.requestPasswordReset({ body: { email: options.email } }));
}
