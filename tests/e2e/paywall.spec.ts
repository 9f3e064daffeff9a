import { readdirSync, readFileSync } from 'node:fs';
import path from 'node:path';
import { expect, type APIRequestContext } from 'playwright/test';
import { defaultFit } from '#lib/plan/check-fit.ts';
import { compilePlan } from '#lib/plan/compile.ts';
import { publicFigures } from '#lib/plan/public-figures.ts';
import { plainText } from '#lib/plan/resolve-prose.ts';
import { resolvePlan } from '#lib/plan/resolve.ts';
import { formatLength } from '#lib/units/format-length.ts';
import { test } from './house.ts';

/** Short texts stand everywhere by chance; a secret must be long enough to be one. */
const MIN_LENGTH = 5;

/** Everything of one plan that must not leave the house unpaid, at its default sizes: as it would be printed, and as it would stand in data. */
function secretsOf(slug: string): { figures: string[]; words: string[]; title: string } {
  const source = readFileSync(path.join('content/plans', slug, 'plan.mdx'), 'utf8');
  const { plan } = compilePlan(source);
  if (!plan) throw new Error(`${slug} does not compile`);
  const resolved = resolvePlan(plan, defaultFit(plan, 'mm'));
  const open = JSON.stringify(publicFigures(resolved));
  const lengths = resolved.parts.flatMap((part) => [part.length, part.width, ...(part.position ?? [])]);
  const known = new Set([
    ...resolved.sizes.flatMap((size) => [size.value, size.min, size.max, size.default]),
    ...resolved.choices.flatMap((choice) =>
      choice.options.flatMap((option) => (typeof option.value === 'number' ? [option.value] : [])),
    ),
    ...Object.values(resolved.overall ?? {}),
    ...resolved.materials.flatMap((material) => [material.nominal, ...material.sizes.flat()]),
  ]);
  const secretLengths = [...new Set(lengths)].filter(
    (nm) => nm > 50_000_000 && nm % 5_000_000 !== 0 && !known.has(nm),
  );
  const print = (nm: number) => [
    String(nm),
    formatLength(nm, { units: 'mm', decimals: 0.1 }).text,
    formatLength(nm, { units: 'in', denominator: 32 }).text,
  ];
  // A part that measures what the whole does gives nothing away.
  const openTexts = new Set([...known].flatMap(print));
  const figures = secretLengths
    .flatMap(print)
    .filter((text) => !openTexts.has(text) && /\d{8,}|\d+ \d+\/\d+"|\d{3,}\.\d/.test(text));
  // The name of a thickness alone is a word of the language and no formula.
  const formulas = [...source.matchAll(/(?:length|width|value|at|every|that)=\{([^}]{12,})\}/g)]
    .map((match) => match[1] ?? '')
    .filter((text) => /[-+*/?<>]/.test(text));
  const steps = resolved.steps.map((step) => plainText(step.body).trim().slice(0, 60));
  const names = [...source.matchAll(/<Part mark="[^"]+" name="([^"]{8,})"/g)].map((match) => match[1] ?? '');
  const isHidden = (text: string) => text.length >= MIN_LENGTH && !open.includes(text);
  return {
    figures: figures.filter(isHidden),
    words: [...formulas, ...steps, ...names].filter(isHidden),
    title: resolved.title,
  };
}

/** The text of an answer with its escapes undone, so that nothing hides behind `&quot;` or `\\u0022`. */
const unfold = (text: string) =>
  text
    .replaceAll('&quot;', '"')
    .replaceAll('&#34;', '"')
    .replaceAll('&#39;', "'")
    .replaceAll('&lt;', '<')
    .replaceAll('&gt;', '>')
    .replaceAll('&amp;', '&')
    .replaceAll('\\"', '"');

/** Whether a secret stands in a text, as a whole: 50 is not found in 508. */
function stands(secret: string, body: string): boolean {
  for (let at = body.indexOf(secret); at >= 0; at = body.indexOf(secret, at + 1)) {
    if (!/[\d.]/.test(body[at - 1] ?? '') && !/\d/.test(body[at + secret.length] ?? '')) return true;
  }
  return false;
}

async function crawl(request: APIRequestContext, from: readonly string[]): Promise<Map<string, string>> {
  const seen = new Map<string, string>();
  const waiting = [...from];
  while (waiting.length > 0 && seen.size < 300) {
    const address = waiting.pop() ?? '';
    if (seen.has(address)) continue;
    const answer = await request.get(address);
    const type = answer.headers()['content-type'] ?? '';
    const body = /text|json|javascript|svg/.test(type) ? await answer.text() : '';
    seen.set(address, unfold(body));
    for (const match of body.matchAll(/(?:href|src|action|component-url|renderer-url)="(\/[^"#]*)"/g))
      waiting.push((match[1] ?? '').replaceAll('&amp;', '&'));
    // Scripts name further scripts.
    for (const match of body.matchAll(/["'](?:\.\/|\/_astro\/)([\w.-]+\.js)["']/g))
      waiting.push(`/_astro/${match[1] ?? ''}`);
  }
  return seen;
}

test('a visitor finds no part size, position, formula, step text or layout of a priced plan anywhere', async ({
  request,
}) => {
  const slugs = readdirSync('content/plans');
  const answers = await crawl(request, [
    '/',
    '/plans',
    '/guides',
    '/sign-in',
    '/plans/boot-bench-for-a-narrow-hall?units=in',
    '/plans/writing-desk-with-two-drawers?units=mm',
    '/plans/toy-chest-that-closes-slowly?units=in&s.width=44+in',
  ]);
  expect(
    [...answers.keys()].filter((address) => address.startsWith('/plans/')).length,
  ).toBeGreaterThanOrEqual(4);
  expect([...answers.keys()].some((address) => address.endsWith('.js'))).toBe(true);
  const site = process.env['E2E_SITE'] ?? '';
  for (const address of [...answers.keys()].filter((each) => /^\/plans\/[a-z-]+$/.test(each))) {
    for (const units of ['mm', 'in']) {
      const answer = await request.post(`/api${address}/fit`, {
        headers: { origin: site },
        data: { fit: { values: {}, measured: {}, units } },
      });
      answers.set(`POST ${address} ${units}`, unfold(await answer.text()));
    }
  }
  const found: string[] = [];
  for (const slug of slugs) {
    const { figures, words, title } = secretsOf(slug);
    expect(figures.length + words.length, `${slug} has secrets to look for`).toBeGreaterThan(20);
    for (const [address, body] of answers) {
      // A figure may stand on the page of another plan by chance; words may stand nowhere.
      const looked = body.includes(title) && address.includes('/plans/') ? [...figures, ...words] : words;
      for (const secret of looked)
        if (stands(secret, body)) found.push(`“${secret}” of ${slug} on ${address}`);
    }
  }
  expect(found).toEqual([]);
});

test('the endpoints of a licence give a visitor nothing, whatever is asked of them', async ({ request }) => {
  for (const address of [
    '/drawer',
    '/drawer/11111111-1111-4111-8111-111111111111',
    '/api/copies/11111111-1111-4111-8111-111111111111',
    '/api/copies/11111111-1111-4111-8111-111111111111/download',
    '/office',
    '/staff',
    '/sales/low-fell-joinery',
  ]) {
    const answer = await request.get(address, { maxRedirects: 0 });
    expect([303, 401, 404], address).toContain(answer.status());
  }
});

test('the built scripts and pages hold no secret of the house', async ({ request }) => {
  const answers = await crawl(request, ['/']);
  const secrets = [
    'AUTH_SECRET',
    'S3_SECRET_ACCESS_KEY',
    'STRIPE_SECRET_KEY',
    'STRIPE_WEBHOOK_SECRET',
    'DATABASE_URL',
  ]
    .map((name) => process.env[name] ?? '')
    .filter(Boolean);
  expect(secrets.length).toBeGreaterThan(3);
  for (const [address, body] of answers) {
    for (const secret of secrets) expect(body.includes(secret), address).toBe(false);
    expect(body, address).not.toMatch(/sk_(test|live)_|whsec_|postgres:\/\/|sourceMappingURL/);
  }
});
