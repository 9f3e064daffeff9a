const SCHEMES: ReadonlySet<string> = new Set(['http', 'https', 'mailto']);

/**
 * An address that may stand in a page, or null. Lets through http, https, mailto and relative addresses; everything else
 * (`javascript:`, `data:`, `vbscript:`, protocol-relative `//host`, control characters that hide a scheme) is refused.
 */
export function safeHref(address: string): string | null {
  const trimmed = address.trim();
  if (trimmed === '' || trimmed.length > 2000) return null;
  // A browser drops tabs, new lines and NULs inside an address before it looks for the scheme.
  for (let i = 0; i < trimmed.length; i += 1) {
    const code = trimmed.charCodeAt(i);
    if (code < 0x20 || code === 0x7f || code === 0x5c) return null;
  }
  if (trimmed.startsWith('//')) return null;
  const colon = trimmed.indexOf(':');
  const end = trimmed.search(/[/?#]/);
  if (colon === -1 || (end !== -1 && end < colon)) return trimmed;
  return SCHEMES.has(trimmed.slice(0, colon).toLowerCase()) ? trimmed : null;
}
