import { QueryTypes, type Transaction } from 'sequelize';
import { sequelize } from '#db/client.ts';

/** Every kind of job and what it carries: ids only, the handler reads the truth from the database. */
export interface JobPayloads {
  'send-email': { emailId: string };
  'work-inbox-event': { eventId: string };
  'make-copy': { copyId: string };
  'prove-revision': { revisionId: string };
  'announce-revision': { revisionId: string };
  'send-payout': { payoutId: string };
}
export type JobName = keyof JobPayloads;

/**
 * Adds a job. Inside a transaction the job exists only if the transaction commits; `key` makes a second call for the same
 * work replace the first while that still waits.
 */
export async function enqueue<Name extends JobName>(
  name: Name,
  payload: JobPayloads[Name],
  options: { key?: string; transaction?: Transaction | undefined; runAt?: Date; maxAttempts?: number } = {},
): Promise<void> {
  await sequelize.query(
    `select graphile_worker.add_job(:name, cast(:payload as json), job_key := :key, run_at := coalesce(cast(:runAt as timestamptz), now()), max_attempts := :maxAttempts)`,
    {
      replacements: {
        name,
        payload: JSON.stringify(payload),
        key: options.key ?? null,
        runAt: options.runAt?.toISOString() ?? null,
        maxAttempts: options.maxAttempts ?? 12,
      },
      type: QueryTypes.SELECT,
      transaction: options.transaction ?? null,
    },
  );
}
