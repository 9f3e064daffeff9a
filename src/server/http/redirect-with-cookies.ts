/** A redirect after a form (303) that also sets cookies which somebody else made. */
export function redirectWithCookies(to: string, cookies: readonly string[]): Response {
  const headers = new Headers({ location: to, 'cache-control': 'no-store' });
  for (const cookie of cookies) headers.append('set-cookie', cookie);
  return new Response(null, { status: 303, headers });
}
