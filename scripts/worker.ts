import { Logger, parseCronItems, run } from 'graphile-worker';
import { assertDurable } from '@/db/durability';
import { closeDatabase } from '@/db/tenant';
import { getConfig } from '@/lib/config';
import { CRON, TASKS } from '@/lib/jobs/tasks';
import { log } from '@/lib/log/log';

await assertDurable();
const runner = await run({
  connectionString: getConfig().databaseUrl,
  concurrency: 2,
  noHandleSignals: true,
  taskList: TASKS,
  parsedCronItems: parseCronItems(CRON),
  logger: new Logger(() => (level, message) => {
    if (level === 'error' || level === 'warning') log().warn({ queue: level }, message);
  }),
});
log().info('worker ready');

let draining = false;

/** Lets running jobs end, hands the others back. */
async function drain(signal: string): Promise<void> {
  if (draining) return;
  draining = true;
  log().info({ signal }, 'worker draining');
  await runner.stop();
  await closeDatabase();
  process.exit(0);
}

for (const signal of ['SIGTERM', 'SIGINT'] as const) process.on(signal, () => void drain(signal));
