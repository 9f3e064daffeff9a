import { createHash } from 'node:crypto';
import { QueryTypes } from 'sequelize';
import { sequelize } from '#db/client.ts';
import { refuse } from '../errors.ts';

/** So many tries in so many seconds, counted from the first. */
export interface Allowance {
  limit: number;
  seconds: number;
}

/** Keys hold addresses and e-mails, so only their hash is kept. */
const hash = (key: string) => `own:${createHash('sha256').update(key).digest('hex')}`;

const NOW_MS = 'cast(extract(epoch from clock_timestamp()) * 1000 as bigint)';

/**
 * Counts one try under a key, in the database, so that all processes share the count. One statement decides and counts:
 * tries at the same moment cannot all pass. Stands outside any transaction, so a try that fails still counts.
 * @throws AppError TOO_MANY with the seconds after which the key is free again
 */
export async function takeToken(key: string, { limit, seconds }: Allowance): Promise<void> {
  const replacements = { key: hash(key), limit, windowMs: seconds * 1000 };
  const taken = await sequelize.query(
    `insert into rate_limits as tries (key, count, last_request) values (:key, 1, ${NOW_MS})
     on conflict (key) do update set
       count = case when tries.last_request <= ${NOW_MS} - :windowMs then 1 else tries.count + 1 end,
       last_request = case when tries.last_request <= ${NOW_MS} - :windowMs then ${NOW_MS} else tries.last_request end
     where tries.last_request <= ${NOW_MS} - :windowMs or tries.count < :limit
     returning count`,
    { replacements, type: QueryTypes.SELECT },
  );
  if (taken.length) return;
  const [row] = await sequelize.query<{ wait: number }>(
    `select cast(ceil((last_request + :windowMs - ${NOW_MS}) / 1000.0) as integer) as wait
     from rate_limits where key = :key`,
    { replacements, type: QueryTypes.SELECT },
  );
  const retryAfter = Math.max(1, row?.wait ?? seconds);
  refuse('TOO_MANY', {
    detail: `Too many tries. Wait ${retryAfter < 120 ? `${retryAfter} seconds` : `${Math.ceil(retryAfter / 60)} minutes`}, then try again.`,
    retryAfter,
  });
}

/** Forgets the tries under a key: what a person got right does not count against them. */
export async function forgetTokens(key: string): Promise<void> {
  await sequelize.query('delete from rate_limits where key = :key', {
    replacements: { key: hash(key) },
    type: QueryTypes.RAW,
  });
}

/** Takes one try back: what a person got right does not use up what others at the same address may try. */
export async function giveTokenBack(key: string): Promise<void> {
  await sequelize.query('update rate_limits set count = greatest(count - 1, 0) where key = :key', {
    replacements: { key: hash(key) },
    type: QueryTypes.RAW,
  });
}

/** Removes counts that are older than a day. @returns how many went */
export async function sweepRateLimits(): Promise<number> {
  const rows = await sequelize.query(
    `delete from rate_limits where last_request < ${NOW_MS} - 86400000 returning 1`,
    { type: QueryTypes.SELECT },
  );
  return rows.length;
}
