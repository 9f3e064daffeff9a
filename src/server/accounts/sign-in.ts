import { auth } from './auth.ts';
import { countTry, tryKeys } from './allowances.ts';
import { askAuth } from './ask-auth.ts';
import { forgetTokens, giveTokenBack } from './rate-limit.ts';

/**
 * Signs in with e-mail and password. The browser always gets a new session; one that it came with ends.
 * @returns the cookies to set
 * @throws AppError TOO_MANY, WRONG_PASSWORD (the same for an unknown address), EMAIL_UNVERIFIED (only after the right password)
 */
export async function signIn(options: {
  email: string;
  password: string;
  headers: Headers;
}): Promise<{ cookies: string[] }> {
  const { email, password, headers } = options;
  await countTry('sign-in', headers, email);
  const { headers: answer } = await askAuth(() =>
    auth.api.signInEmail({ body: { email, password }, headers, returnHeaders: true }),
  );
  const keys = tryKeys('sign-in', headers, email);
  await Promise.all([forgetTokens(keys.account), giveTokenBack(keys.address)]);
  const former = await auth.api.getSession({ headers, query: { disableRefresh: true } });
  if (former) await auth.api.revokeSession({ headers, body: { token: former.session.token } });
  return { cookies: answer.getSetCookie() };
}
