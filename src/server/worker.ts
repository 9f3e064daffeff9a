import { Logger, parseCrontab, run } from 'graphile-worker';
import { env } from './env.ts';
import { crontab, tasks } from './jobs/tasks.ts';
import { log } from './log.ts';
import { ensureBucket } from './storage/object-store.ts';

const logger = new Logger((scope) => (level, message) => {
  // The queue's own chatter is of no use to anybody; faults are.
  if (level === 'error') log.error({ job: scope.taskIdentifier }, message);
  else if (level === 'warning') log.warn({ job: scope.taskIdentifier }, message);
});

await ensureBucket();
const runner = await run({
  connectionString: env.DATABASE_URL,
  concurrency: 4,
  noHandleSignals: true,
  pollInterval: 2_000,
  taskList: tasks,
  parsedCronItems: parseCrontab(crontab),
  logger,
});
log.info('worker is waiting for jobs');

async function stop(): Promise<void> {
  await runner.stop();
  process.exit(0);
}
process.once('SIGTERM', () => void stop());
process.once('SIGINT', () => void stop());
await runner.promise;
