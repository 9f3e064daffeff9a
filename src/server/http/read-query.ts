/** Query parameters as an object; of a repeated one the first counts. */
export function readQuery(url: URL): Record<string, string> {
  const query = new Map<string, string>();
  for (const [key, value] of url.searchParams) if (!query.has(key)) query.set(key, value);
  return Object.fromEntries(query);
}
