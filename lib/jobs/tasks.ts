import type { CronItem, TaskList } from 'graphile-worker';
import { log } from '@/lib/log/log';
import { systemRuntime } from '@/lib/runtime';
import { JOB_TASK, QueuedJob } from './queue';
import { sweep } from './sweep';

/**
 * What the worker can do; each task may be run twice without harm.
 *
 * @param runJob does what the row of a job says
 */
export function tasks(runJob: (job: QueuedJob) => Promise<string>): TaskList {
  return {
    sweep: async () => {
      const removed = await sweep(systemRuntime);
      log().info({ task: 'sweep', removed }, 'job done');
    },
    [JOB_TASK]: async (payload) => {
      const job = QueuedJob.parse(payload);
      log().info({ task: JOB_TASK, ...job, outcome: await runJob(job) }, 'job done');
    },
  };
}

/** Its work is a service's: the worker brings it in. */
export const WATCH_CONTROL = 'watchControl';

/** When it does so without being asked. */
export const CRON: CronItem[] = [
  { task: 'sweep', match: '*/10 * * * *', options: { backfillPeriod: 0 }, identifier: 'sweep' },
  { task: WATCH_CONTROL, match: '*/10 * * * *', options: { backfillPeriod: 0 }, identifier: WATCH_CONTROL },
];
