import { randomBytes } from 'node:crypto';
import pg from 'pg';
import { afterEach, beforeEach, expect, inject, vi } from 'vitest';

/*
 * Runs before a test file's own imports: gives the file a database of its own, copied from the migrated template, and the settings that
 * src/server/env.ts reads once when it is first imported.
 */
const services = inject('services');
const database = `test_${randomBytes(6).toString('hex')}`;
const admin = new URL(services.template);
admin.pathname = '/postgres';

/** Only one copy of the template can be made at a time; others wait their turn. */
async function copyTemplate(): Promise<void> {
  const client = new pg.Client({ connectionString: admin.href });
  await client.connect();
  try {
    await client.query('select pg_advisory_lock(728115)');
    await client.query(`create database ${database} template template_benchleaf`);
  } finally {
    await client.end();
  }
}
await copyTemplate();

const own = new URL(services.template);
own.pathname = `/${database}`;
Object.assign(process.env, {
  NODE_ENV: 'test',
  SITE_URL: 'http://benchleaf.test',
  DATABASE_URL: own.href,
  DATABASE_POOL: '8',
  AUTH_SECRET: 'an auth secret for the tests, long enough',
  S3_ENDPOINT: services.objects,
  S3_REGION: 'eu-central-1',
  S3_BUCKET: `bucket-${database.replace('_', '-')}`,
  S3_ACCESS_KEY_ID: 'benchleaf-test',
  S3_SECRET_ACCESS_KEY: 'a secret of the tests',
  SMTP_URL: services.smtp,
  STRIPE_SECRET_KEY: 'sk_test_service',
  STRIPE_WEBHOOK_SECRET: 'whsec_0123456789abcdef0123456789abcdef',
  STRIPE_API_BASE: services.payments,
  LOG_LEVEL: 'silent',
  DEMO: 'yes',
});

// A complaint that no test expects is a fault.
beforeEach(() => {
  vi.spyOn(console, 'error');
});
afterEach(() => {
  expect(vi.mocked(console.error).mock.calls, 'nothing was complained of').toEqual([]);
  vi.restoreAllMocks();
});
