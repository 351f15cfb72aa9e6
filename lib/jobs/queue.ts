import { sql } from 'drizzle-orm';
import { runMigrations } from 'graphile-worker';
import * as z from 'zod';
import type { Tenant } from '@/db/tenant';
import { getConfig } from '@/lib/config';

/** What the queue carries of a job: where its row stands. */
export const QueuedJob = z.strictObject({ organizationId: z.uuid(), jobId: z.uuid() });
export type QueuedJob = z.output<typeof QueuedJob>;

/** The one task that all jobs are. */
export const JOB_TASK = 'job';

/** The queue gives a job up after so many tries. The job's own limit is lower, so that its row always tells the end. */
const QUEUE_TRIES = 25;

/** Makes the queue's tables where they are not there yet: a request may add a job before any worker has run. */
export function prepareQueue(): Promise<void> {
  return runMigrations({ connectionString: getConfig().databaseUrl });
}

/**
 * Adds a job to the queue within the transaction that writes its row: both are there, or neither. Jobs of one
 * organization are done one after another: however many it asks for, another's is next at a free hand.
 */
export async function enqueue({ db }: Tenant, job: QueuedJob): Promise<void> {
  await db.execute(
    sql`select graphile_worker.add_job(${JOB_TASK}, ${JSON.stringify(job)}::json,
      queue_name := ${job.organizationId}, max_attempts := ${QUEUE_TRIES}, job_key := ${job.jobId})`,
  );
}
