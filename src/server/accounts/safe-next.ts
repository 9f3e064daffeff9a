/**
 * Where to go after signing in: a path on this site and nothing else. Anything that a browser could read as another
 * host or another scheme, or that could end a header, gives `/`.
 */
export function safeNext(path: string | null | undefined): string {
  if (!path?.startsWith('/') || path.length > 2_000) return '/';
  // Browsers read a backslash as a slash, and drop control characters before they look at an address.
  if (/^\/[/\\]|[\\\p{Cc}]|%0[0-9a-f]|%5c/iu.test(path)) return '/';
  const here = 'https://here.invalid';
  const url = URL.canParse(path, here) ? new URL(path, here) : undefined;
  if (url?.origin !== here || url.pathname.startsWith('//')) return '/';
  return url.pathname + url.search + url.hash;
}
