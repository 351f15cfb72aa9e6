import { EventEmitter } from 'node:events';
import { Logger, parseCronItems, run, type WorkerEvents } from 'graphile-worker';
import { assertDurable } from '@/db/durability';
import { closeDatabase } from '@/db/tenant';
import { getConfig } from '@/lib/config';
import { Presence } from '@/lib/jobs/presence';
import { CRON, tasks, WATCH_CONTROL } from '@/lib/jobs/tasks';
import { log } from '@/lib/log/log';
import { systemRuntime } from '@/lib/runtime';
import { watchRecent } from '@/lib/services/control/watchRecent';
import { runJob } from '@/lib/services/jobs/run';
import { Courier } from '@/lib/services/webhookDeliveries/courier';

let draining = false;

await assertDurable();
const { databaseUrl: connectionString } = getConfig();
const presence = new Presence(connectionString);
await presence.begin();
const events: WorkerEvents = new EventEmitter();
// Jobs are locked under the pool's id.
events.on('pool:create', ({ workerPool }) => {
  presence.add(workerPool.id).catch(giveUp);
});
const runner = await run({
  connectionString,
  concurrency: 2,
  events,
  // With them a stop waits until it is written what became of a job: by default a job that ends while the worker stops
  // stays locked for hours.
  preset: { worker: { completeJobBatchDelay: 0, failJobBatchDelay: 0 } },
  noHandleSignals: true,
  taskList: {
    ...tasks((job) => runJob(systemRuntime, job)),
    [WATCH_CONTROL]: () => watchRecent(systemRuntime),
  },
  parsedCronItems: parseCronItems(CRON),
  logger: new Logger(() => (level, message) => {
    if (level === 'error' || level === 'warning') log().warn({ queue: level }, message);
  }),
});
const courier = new Courier(systemRuntime);
courier.start();
log().info('worker ready');

/** Lets running jobs end, hands the others back. */
async function drain(signal: string): Promise<void> {
  if (draining) return;
  draining = true;
  log().info({ signal }, 'worker draining');
  await Promise.all([runner.stop(), courier.stop()]);
  await presence.end();
  await closeDatabase();
  process.exit(0);
}

/** The queue gives up where it cannot write what became of a job: whoever watches over the worker starts another. */
function giveUp(): void {
  if (draining) return;
  log().fatal('worker gives up');
  process.exit(1);
}

runner.promise.then(giveUp, giveUp);
for (const signal of ['SIGTERM', 'SIGINT'] as const) process.on(signal, () => void drain(signal));
