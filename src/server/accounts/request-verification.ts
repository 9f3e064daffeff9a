import { auth } from './auth.ts';
import { countTry } from './allowances.ts';
import { askAuth } from './ask-auth.ts';

/**
 * Sends the link that confirms an address once more, if an account waits for it. The caller learns nothing of that.
 * @throws AppError TOO_MANY
 */
export async function requestVerification(options: { email: string; headers: Headers }): Promise<void> {
  await countTry('ask-verification', options.headers, options.email);
  await askAuth(() => auth.api.sendVerificationEmail({ body: { email: options.email } }));
}
