import { randomBytes } from 'node:crypto';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import path from 'node:path';
import * as z from 'zod';
import { WEBHOOK_EVENTS } from '#server/checkout/webhook-events.ts';
import { startPostgres, type RunningPostgres } from './postgres.ts';
import type { Ports } from './ports.ts';
import { createSupervisor, waitForAddress, type Supervisor } from './processes.ts';

export interface HouseOptions {
  ports: Ports;
  /** Where this house keeps its database, objects, mails and secrets. */
  folder: string;
  /** Folder of the built site. */
  dist: string;
  isThrowaway: boolean;
  onDeath: (message: string) => void;
}

export interface House {
  /** The environment of web, worker, seeder and tests. */
  env: Record<string, string>;
  supervisor: Supervisor;
  /** Addresses of the stand-ins that run; one is missing where the real service is used. */
  standIns: { mail?: string; payments?: string; objects?: string };
  stop(): Promise<void>;
}

const secretsSchema = z.object({ auth: z.string(), s3: z.string(), webhook: z.string() });

/** Secrets of this machine, made once and kept with its data. */
function findSecrets(folder: string): z.infer<typeof secretsSchema> {
  const file = path.join(folder, 'secrets.json');
  if (existsSync(file)) return secretsSchema.parse(JSON.parse(readFileSync(file, 'utf8')));
  const word = (bytes: number) => randomBytes(bytes).toString('hex');
  const secrets = { auth: word(32), s3: word(20), webhook: `whsec_${word(24)}` };
  mkdirSync(folder, { recursive: true });
  writeFileSync(file, JSON.stringify(secrets), { mode: 0o600 });
  return secrets;
}

const given = (name: string) => process.env[name] || undefined;

/**
 * Starts everything that the site stands on: the private PostgreSQL and the stand-ins for object store, mail and payments. Where the environment (or `.env`) names a
 * real service, its stand-in stays away.
 */
export async function startHouse(options: HouseOptions): Promise<House> {
  const { ports, folder } = options;
  mkdirSync(folder, { recursive: true });
  const secrets = findSecrets(folder);
  const supervisor = createSupervisor(folder, options.onDeath);
  const local = (port: number) => `http://127.0.0.1:${String(port)}`;
  const site = given('SITE_URL') ?? local(ports.web);
  const standIns: House['standIns'] = {};
  let postgres: RunningPostgres | null = null;

  const stop = async () => {
    await supervisor.stopAll();
    await postgres?.stop();
  };
  try {
    const env: Record<string, string> = {
      NODE_ENV: 'production',
      DEMO: 'yes',
      HOST: '127.0.0.1',
      PORT: String(ports.web),
      SITE_URL: site,
      BENCHLEAF_DIST: options.dist,
      AUTH_SECRET: given('AUTH_SECRET') ?? secrets.auth,
      LOG_LEVEL: given('LOG_LEVEL') ?? 'warn',
    };
    if (given('DATABASE_URL')) env['DATABASE_URL'] = given('DATABASE_URL') ?? '';
    else {
      postgres = await startPostgres({ folder, port: ports.postgres, isThrowaway: options.isThrowaway });
      env['DATABASE_URL'] = await postgres.urlOf('benchleaf');
    }
    if (!given('S3_SECRET_ACCESS_KEY')) {
      Object.assign(env, {
        S3_ENDPOINT: local(ports.objects),
        S3_REGION: 'eu-central-1',
        S3_BUCKET: 'benchleaf',
        S3_ACCESS_KEY_ID: 'benchleaf-local',
        S3_SECRET_ACCESS_KEY: secrets.s3,
      });
      supervisor.start({
        name: 'objects',
        script: 'tests/fakes/object-store/serve.ts',
        args: ['--port', String(ports.objects), '--folder', path.join(folder, 'objects')],
        env,
        isQuiet: true,
      });
      standIns.objects = local(ports.objects);
    }
    if (!given('SMTP_URL')) {
      env['SMTP_URL'] = `smtp://127.0.0.1:${String(ports.smtp)}`;
      supervisor.start({
        name: 'mail',
        script: 'tests/fakes/mail/serve.ts',
        args: [
          '--smtp',
          String(ports.smtp),
          '--page',
          String(ports.mail),
          '--file',
          path.join(folder, 'mails.jsonl'),
        ],
        env,
        isQuiet: true,
      });
      standIns.mail = local(ports.mail);
    }
    if (!given('STRIPE_SECRET_KEY')) {
      Object.assign(env, {
        STRIPE_SECRET_KEY: 'sk_test_benchleaf_local',
        STRIPE_WEBHOOK_SECRET: secrets.webhook,
        STRIPE_API_BASE: local(ports.payments),
      });
      supervisor.start({
        name: 'payments',
        script: 'tests/fakes/payments/serve.ts',
        args: [
          '--port',
          String(ports.payments),
          '--state',
          path.join(folder, 'payments.jsonl'),
          '--public-url',
          local(ports.payments),
          '--webhook-url',
          `${site}/api/webhooks/payments`,
          '--webhook-secret',
          secrets.webhook,
          '--webhook-events',
          WEBHOOK_EVENTS.join(','),
        ],
        env,
        isQuiet: true,
      });
      standIns.payments = local(ports.payments);
    }
    await Promise.all([
      standIns.objects ? waitForAddress(`${standIns.objects}/`, 'the object store') : null,
      standIns.mail ? waitForAddress(standIns.mail, 'the mail sink') : null,
      standIns.payments ? waitForAddress(`${standIns.payments}/_health`, 'the payment stand-in') : null,
    ]);
    return { env, supervisor, standIns, stop };
  } catch (error) {
    await stop();
    throw error;
  }
}

/** Brings the database to the newest state and seeds the demo. Both may be run again. */
export async function prepareData({ supervisor, env }: House, options: { isSeeded: boolean }): Promise<void> {
  await supervisor.run({ name: 'migrate', script: 'db/migrate.ts', env });
  if (options.isSeeded) await supervisor.run({ name: 'seed', script: 'db/seeds/seed.ts', env });
}

/** Starts web and worker and waits until the site is well. */
export async function startSite({ supervisor, env }: House): Promise<void> {
  supervisor.start({ name: 'worker', script: 'src/server/worker.ts', env });
  supervisor.start({ name: 'web', script: 'src/server/web.ts', env });
  await waitForAddress(`http://127.0.0.1:${env['PORT'] ?? ''}/healthz`, 'the site');
}
