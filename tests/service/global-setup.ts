import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { runMigrations } from 'graphile-worker';
import type { TestProject } from 'vitest/node';
import { migrate } from '#db/migrate.ts';
import { startPostgres } from '#src/launch/postgres.ts';
import { findFreeBase, portsFrom } from '#src/launch/ports.ts';
import { startMailSink } from '#tests/fakes/mail/start-mail-sink.ts';
import { startObjectStore } from '#tests/fakes/object-store/start-object-store.ts';
import { startPayments } from '#tests/fakes/payments/start-payments.ts';

/** Where the services are that every test file shares; each file has a database of its own. */
export interface ServiceAddresses {
  /** The database that is copied for each file, migrated and empty. */
  template: string;
  objects: string;
  smtp: string;
  mail: string;
  payments: string;
}

declare module 'vitest' {
  interface ProvidedContext {
    services: ServiceAddresses;
  }
}

const S3_KEYS = { accessKeyId: 'benchleaf-test', secretAccessKey: 'a secret of the tests' };

/** Starts the real local services once for all files: PostgreSQL, the object store behind its proxy, the mail sink, the payment stand-in. */
export default async function startServices(project: TestProject): Promise<() => Promise<void>> {
  const folder = mkdtempSync(path.join(tmpdir(), 'benchleaf-service-'));
  const ports = portsFrom(await findFreeBase());
  const postgres = await startPostgres({ folder, port: ports.postgres, isThrowaway: true });
  const template = await postgres.urlOf('template_benchleaf');
  await migrate(template);
  await runMigrations({ connectionString: template });
  const objects = await startObjectStore({
    port: ports.objects,
    folder: path.join(folder, 'objects'),
    region: 'eu-central-1',
    ...S3_KEYS,
  });
  const mail = await startMailSink({ smtpPort: ports.smtp, pagePort: ports.mail });
  const payments = await startPayments({ port: ports.payments });
  project.provide('services', {
    template,
    objects: objects.url,
    smtp: mail.smtpUrl,
    mail: mail.pageUrl,
    payments: payments.url,
  });
  return async () => {
    await Promise.all([objects.close(), mail.close(), payments.close()]);
    await postgres.stop();
    rmSync(folder, { recursive: true, force: true });
  };
}
