import type { TaskList } from 'graphile-worker';
import * as z from 'zod';
import type { JobName } from './enqueue.ts';

/** A job's handler is loaded when the first such job comes, so that web and command line never load what only a worker needs. */
const task = <Payload>(
  schema: z.ZodType<Payload>,
  load: () => Promise<(payload: Payload) => Promise<unknown>>,
) => {
  return async (payload: unknown): Promise<void> => {
    const run = await load();
    await run(schema.parse(payload));
  };
};

const jobs: Record<JobName, (payload: unknown) => Promise<void>> = {
  'send-email': task(z.object({ emailId: z.uuid() }), async () => {
    const { sendEmail } = await import('../mail/send-email.ts');
    return ({ emailId }) => sendEmail(emailId);
  }),
  'work-inbox-event': task(z.object({ eventId: z.string().max(255) }), async () => {
    const { workInboxEvent } = await import('../checkout/work-inbox-event.ts');
    return ({ eventId }) => workInboxEvent(eventId);
  }),
  'make-copy': task(z.object({ copyId: z.uuid() }), async () => {
    const { makeCopy } = await import('../copies/make-copy.ts');
    return ({ copyId }) => makeCopy(copyId);
  }),
  'prove-revision': task(z.object({ revisionId: z.uuid() }), async () => {
    const { proveRevision } = await import('../publishing/prove-revision.ts');
    return ({ revisionId }) => proveRevision(revisionId);
  }),
  'announce-revision': task(z.object({ revisionId: z.uuid() }), async () => {
    const { announceRevision } = await import('../publishing/announce-revision.ts');
    return ({ revisionId }) => announceRevision(revisionId);
  }),
  'send-payout': task(z.object({ payoutId: z.uuid() }), async () => {
    const { sendPayout } = await import('../sales/pay-out.ts');
    return ({ payoutId }) => sendPayout(payoutId);
  }),
};

/** Everything that a worker does: the jobs that requests leave behind, and the sweeps that the clock starts. */
export const tasks: TaskList = {
  ...jobs,
  'sweep-orders': async () => {
    const { sweepOrders } = await import('../checkout/sweep-orders.ts');
    await sweepOrders();
  },
  'sweep-rows': async () => {
    const [{ sweepFormMemories }, { sweepRateLimits }, { sweepSessions }] = await Promise.all([
      import('../http/form-memory.ts'),
      import('../accounts/rate-limit.ts'),
      import('../accounts/sessions.ts'),
    ]);
    await sweepFormMemories();
    await sweepRateLimits();
    await sweepSessions();
  },
};

/** When the sweeps run, in UTC: orders every five minutes, rows that ran out once an hour. */
export const crontab = `*/5 * * * * sweep-orders
17 * * * * sweep-rows`;
