import { auth } from './auth.ts';
import { countTry } from './allowances.ts';
import { askAuth } from './ask-auth.ts';

/**
 * Makes an account and sends the link that confirms its address; until then nobody can sign in. For an address that has
 * an account already the answer and the work are the same, and its owner is told by e-mail.
 * @throws AppError TOO_MANY
 */
export async function signUp(options: {
  name: string;
  email: string;
  password: string;
  headers: Headers;
}): Promise<void> {
  const { name, email, password, headers } = options;
  await countTry('sign-up', headers, email);
  await askAuth(() => auth.api.signUpEmail({ body: { name, email, password }, headers }));
}
