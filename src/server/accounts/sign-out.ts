import { auth } from './auth.ts';

/** Ends the session of this browser, in the database too. Fine when there is none. @returns the cookies to set */
export async function signOut(headers: Headers): Promise<{ cookies: string[] }> {
  const { headers: answer } = await auth.api.signOut({ headers, returnHeaders: true });
  return { cookies: answer.getSetCookie() };
}
