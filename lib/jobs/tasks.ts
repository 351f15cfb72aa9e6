import type { CronItem, TaskList } from 'graphile-worker';
import { log } from '@/lib/log/log';
import { systemRuntime } from '@/lib/runtime';
import { sweep } from './sweep';

/** What the worker can do; each task may be run twice without harm. */
export const TASKS: TaskList = {
  sweep: async () => {
    const removed = await sweep(systemRuntime);
    log().info({ task: 'sweep', removed }, 'job done');
  },
};

/** When it does so without being asked. */
export const CRON: CronItem[] = [
  { task: 'sweep', match: '*/10 * * * *', options: { backfillPeriod: 0 }, identifier: 'sweep' },
];
