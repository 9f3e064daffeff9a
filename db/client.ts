import { Sequelize } from 'sequelize';
import { env } from '#server/env.ts';

/**
 * The connection pool of this process. A query or a wait for a connection that takes too long is given up,
 * so that a stalled database turns into an answer and not into a hanging page.
 */
export const sequelize = new Sequelize(env.DATABASE_URL, {
  dialect: 'postgres',
  logging: false,
  pool: { max: env.DATABASE_POOL, min: 0, acquire: 3_000, idle: 10_000 },
  dialectOptions: {
    statement_timeout: 15_000,
    idle_in_transaction_session_timeout: 30_000,
    connectionTimeoutMillis: 3_000,
  },
  define: { underscored: true, timestamps: false },
});
