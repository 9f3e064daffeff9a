import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';

/** Names of settings in a text, with or without a comment sign in front. */
const namesIn = (text: string, pattern: RegExp) =>
  [...new Set([...text.matchAll(pattern)].map((match) => match[1]))].sort();

const good = {
  NODE_ENV: 'production',
  SITE_URL: 'https://plans.example',
  DATABASE_URL: 'postgres://a:b@127.0.0.1/c',
  AUTH_SECRET: '0123456789abcdef0123456789abcdef',
  S3_ACCESS_KEY_ID: 'k',
  S3_SECRET_ACCESS_KEY: 's',
  SMTP_URL: 'smtp://127.0.0.1',
  STRIPE_SECRET_KEY: 'sk_test_x',
  STRIPE_WEBHOOK_SECRET: 'whsec_x',
};

/** env.ts reads the settings when it is first imported, so they have to be there by then. */
async function importReader() {
  Object.assign(process.env, good, { NODE_ENV: 'test' });
  return (await import('#server/env.ts')).readEnv;
}

describe('settings', () => {
  it('all stand in .env.example, and nothing else does', () => {
    const schema = readFileSync('src/server/env.ts', 'utf8');
    const example = readFileSync('.env.example', 'utf8');
    expect(namesIn(example, /^#? ?([A-Z][A-Z0-9_]+)=/gm)).toEqual(
      namesIn(schema, /^ {4}([A-Z][A-Z0-9_]+): z/gm),
    );
  });

  it('that are wrong are all named at once', async () => {
    const readEnv = await importReader();
    expect(() =>
      readEnv({ ...good, SITE_URL: 'plans.example', DATABASE_URL: 'mysql://x', AUTH_SECRET: 'short' }),
    ).toThrow(/AUTH_SECRET[\s\S]*|SITE_URL[\s\S]*DATABASE_URL/);
  });

  it.each([
    ['a local secret', { AUTH_SECRET: 'a local secret of this one machine 1234' }],
    ['an address without https', { SITE_URL: 'http://plans.example' }],
    ['a stand-in for payments', { STRIPE_API_BASE: 'http://127.0.0.1:1' }],
  ])('refuse %s in production', async (_, change) => {
    const readEnv = await importReader();
    expect(() => readEnv({ ...good, ...change })).toThrow('Benchleaf cannot start');
    expect(readEnv({ ...good, ...change, DEMO: 'yes' }).DEMO).toBe(true);
  });

  it('keep only the origin of the site’s address', async () => {
    const readEnv = await importReader();
    expect(readEnv({ ...good, SITE_URL: 'https://plans.example/some/path' }).SITE_URL).toBe(
      'https://plans.example',
    );
  });
});
