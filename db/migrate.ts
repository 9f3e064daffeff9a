import { readdir } from 'node:fs/promises';
import { fileURLToPath, pathToFileURL } from 'node:url';
import path from 'node:path';
import { QueryTypes, Sequelize, type Transaction } from 'sequelize';
import { SequelizeStorage, Umzug } from 'umzug';
import * as z from 'zod';

/** What a migration gets: `sql` runs statements inside the transaction of this one migration. */
export interface MigrationContext {
  sql: (statements: string) => Promise<void>;
}
export type Migration = (context: MigrationContext) => Promise<void>;

const folder = path.join(path.dirname(fileURLToPath(import.meta.url)), 'migrations');
/** Any number that all Benchleaf processes share: only one of them migrates at a time. */
const LOCK_KEY = 728_114;

async function runMigration(sequelize: Sequelize, file: string, direction: 'up' | 'down'): Promise<void> {
  const module: unknown = await import(pathToFileURL(path.join(folder, file)).href);
  const migration = z.object({ up: z.custom<Migration>(), down: z.custom<Migration>() }).parse(module);
  await sequelize.transaction(async (transaction: Transaction) => {
    await migration[direction]({
      sql: async (statements) => {
        await sequelize.query(statements, { transaction, raw: true });
      },
    });
  });
}

/**
 * Brings a database to the newest state. Safe to run by several processes at once, and again.
 * @returns the names of the migrations that were run now
 */
export async function migrate(databaseUrl: string): Promise<string[]> {
  const sequelize = new Sequelize(databaseUrl, { dialect: 'postgres', logging: false, pool: { max: 3 } });
  try {
    const files = (await readdir(folder)).filter((file) => file.endsWith('.ts')).sort();
    const umzug = new Umzug({
      // The name carries no ending, so that a compiled build does not run everything again.
      migrations: files.map((file) => ({
        name: file.replace(/\.ts$/, ''),
        up: () => runMigration(sequelize, file, 'up'),
        down: () => runMigration(sequelize, file, 'down'),
      })),
      storage: new SequelizeStorage({ sequelize, tableName: 'migrations' }),
      logger: undefined,
    });
    return await sequelize.transaction(async (transaction) => {
      await sequelize.query('select pg_advisory_xact_lock(:key)', {
        replacements: { key: LOCK_KEY },
        transaction,
        type: QueryTypes.SELECT,
      });
      return (await umzug.up()).map((migration) => migration.name);
    });
  } finally {
    await sequelize.close();
  }
}

if (process.argv[1] && import.meta.url === pathToFileURL(process.argv[1]).href) {
  const { env } = await import('#server/env.ts');
  const { runMigrations: prepareQueue } = await import('graphile-worker');
  const ran = await migrate(env.DATABASE_URL);
  await prepareQueue({ connectionString: env.DATABASE_URL });
  console.log(ran.length ? `Migrated: ${ran.join(', ')}` : 'The database is up to date.');
}
