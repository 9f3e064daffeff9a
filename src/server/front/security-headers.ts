import type { ServerResponse } from 'node:http';

/** What is said on every answer, whoever makes it: pages, files, refusals. */
const ALWAYS: Readonly<Record<string, string>> = {
  'x-content-type-options': 'nosniff',
  'referrer-policy': 'strict-origin-when-cross-origin',
  'cross-origin-opener-policy': 'same-origin',
  'cross-origin-resource-policy': 'same-origin',
  'x-frame-options': 'DENY',
  'permissions-policy': 'camera=(), microphone=(), geolocation=(), payment=(), usb=(), interest-cohort=()',
};

/** For answers that carry no policy of their own: nothing may run or be framed. */
const BARE_POLICY = "default-src 'none'; frame-ancestors 'none'; base-uri 'none'; form-action 'none'";

const POLICY = 'content-security-policy';

/**
 * Puts the security headers on an answer before anything else is said. Pages bring their own policy with hashes of their scripts; what brings none gets the
 * bare one as soon as the head is written.
 */
export function setSecurityHeaders(response: ServerResponse, isHttps: boolean): void {
  for (const [name, value] of Object.entries(ALWAYS)) response.setHeader(name, value);
  if (isHttps) response.setHeader('strict-transport-security', 'max-age=63072000; includeSubDomains');
  const writeHead = response.writeHead.bind(response) as (...args: unknown[]) => ServerResponse;
  response.writeHead = ((...args: unknown[]) => {
    const headers = args.find(
      (argument): argument is Record<string, unknown> =>
        typeof argument === 'object' && argument !== null && !Array.isArray(argument),
    );
    const has =
      response.hasHeader(POLICY) ||
      (headers && Object.keys(headers).some((name) => name.toLowerCase() === POLICY));
    if (!has) response.setHeader(POLICY, BARE_POLICY);
    return writeHead(...args);
  }) as ServerResponse['writeHead'];
}
