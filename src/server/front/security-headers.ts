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
 * Puts the security headers on an answer before anything else is said. Pages bring their own policy with hashes of their scripts, to which the
 * front adds where their forms may lead; what brings none gets the bare one as soon as the head is written.
 * @param formTargets origins that a form of ours may end at besides our own: the payment service's pages
 */
export function setSecurityHeaders(
  response: ServerResponse,
  options: { isHttps: boolean; formTargets: readonly string[] },
): void {
  for (const [name, value] of Object.entries(ALWAYS)) response.setHeader(name, value);
  if (options.isHttps) response.setHeader('strict-transport-security', 'max-age=63072000; includeSubDomains');
  const writeHead = response.writeHead.bind(response) as (...args: unknown[]) => ServerResponse;
  response.writeHead = ((...args: unknown[]) => {
    const given = args.find(
      (argument): argument is Record<string, unknown> =>
        typeof argument === 'object' && argument !== null && !Array.isArray(argument),
    );
    const named = Object.keys(given ?? {}).find((name) => name.toLowerCase() === POLICY);
    const own = named ? String(given?.[named]) : response.getHeader(POLICY);
    const policy = typeof own === 'string' && own ? completePolicy(own, options.formTargets) : BARE_POLICY;
    if (given && named) given[named] = policy;
    else response.setHeader(POLICY, policy);
    return writeHead(...args);
  }) as ServerResponse['writeHead'];
}

function completePolicy(policy: string, formTargets: readonly string[]): string {
  if (/form-action|sandbox/.test(policy)) return policy;
  return `${policy.replace(/;\s*$/, '')}; form-action ${["'self'", ...formTargets].join(' ')}`;
}
