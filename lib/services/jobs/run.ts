import { type Tenant, tenantTransaction } from '@/db/tenant';
import type { Actor } from '@/lib/access/actor';
import type { QueuedJob } from '@/lib/jobs/queue';
import { log } from '@/lib/log/log';
import { loggable } from '@/lib/log/loggable';
import { Problem } from '@/lib/problem';
import type { Runtime } from '@/lib/runtime';
import { endJob, type JobContext, updateJob } from './end';
import { KINDS } from './kinds';
import { findJob, hasEnded, type JobRow } from './load';
import type { RunningJob } from './work';

/** So often a job is taken up before it is given up: each time a worker died of it or the hub itself failed. */
const MAX_ATTEMPTS = 5;

/** Somebody else has the job now, or it was cancelled: whatever was still to be written is not. */
class Overtaken extends Error {
  override readonly name = 'Overtaken';
}

/**
 * Takes a job up and does it. The work itself runs outside every transaction; each step, and the result with the job's
 * end, is one transaction that first sees whether the job is still this run's to do. So a job whose worker died, or
 * was only believed dead, has one result, whoever comes first.
 *
 * @returns what became of it, for the log
 * @throws Error where the hub failed and the queue shall try again
 */
export async function runJob(runtime: Runtime, { organizationId, jobId }: QueuedJob): Promise<string> {
  const inTransaction = <T>(work: (tenant: Tenant) => Promise<T>) => tenantTransaction(organizationId, work);
  const job = await inTransaction((tenant) => takeUp({ tenant, runtime }, organizationId, jobId));
  if (!job) return 'nothing to do';
  const actor: Actor = { kind: 'job', organizationId, name: `${job.kind} for ${job.createdBy}` };
  const own = <T>(work: (context: JobContext, row: JobRow) => Promise<T>) =>
    inTransaction(async (tenant) => {
      const context = { tenant, runtime, requestId: job.requestId };
      const row = await findJob(tenant, organizationId, jobId, true);
      if (row?.status !== 'running' || row.attempts !== job.attempts) throw new Overtaken();
      return work(context, row);
    });
  const running: RunningJob = {
    job,
    runtime,
    read: inTransaction,
    step: async (step, done, of) => {
      const goesOn = await own(async (context, row) => {
        if (row.cancelRequestedAt === null) {
          await updateJob(context.tenant, row, { progress: { step, done, of } });
          return true;
        }
        await endJob(context, actor, row, { status: 'cancelled' });
        return false;
      });
      if (!goesOn) throw new Overtaken();
    },
  };
  try {
    const finish = await KINDS[job.kind](running);
    return await own(async (context, row) => {
      const status = row.cancelRequestedAt === null ? 'succeeded' : 'cancelled';
      if (status === 'succeeded') await finish(context, actor);
      await endJob(context, actor, row, { status });
      return status;
    });
  } catch (error) {
    if (error instanceof Overtaken) return 'left to others';
    const outcome = await own((context, row) => failed(context, actor, row, error));
    if (outcome === 'to be tried again') throw new Error('The job failed and is to be tried again.');
    return outcome;
  }
}

/** The job, marked as this run's own; null where nothing is left to do. */
async function takeUp(
  { tenant, runtime }: { tenant: Tenant; runtime: Runtime },
  organizationId: string,
  jobId: string,
): Promise<JobRow | null> {
  const job = await findJob(tenant, organizationId, jobId, true);
  if (!job || hasEnded(job)) return null;
  const context = { tenant, runtime, requestId: job.requestId };
  const actor: Actor = { kind: 'job', organizationId, name: `${job.kind} for ${job.createdBy}` };
  if (job.cancelRequestedAt !== null) {
    await endJob(context, actor, job, { status: 'cancelled' });
    return null;
  }
  if (job.attempts >= MAX_ATTEMPTS) {
    await giveUp(context, actor, job);
    return null;
  }
  return updateJob(tenant, job, {
    status: 'running',
    attempts: job.attempts + 1,
    startedAt: job.startedAt ?? runtime.now().toISOString(),
  });
}

/** A problem is final; a failure of the hub's own is tried again, so many times. */
async function failed(context: JobContext, actor: Actor, job: JobRow, error: unknown): Promise<string> {
  if (error instanceof Problem) {
    const { code, message: detail, options } = error;
    const problem = { code, detail, ...(options.errors ? { errors: [...options.errors] } : {}) };
    await endJob(context, actor, job, { status: 'failed', problem });
    return 'failed';
  }
  log().error({ job: job.id, attempt: job.attempts, ...loggable(error) }, 'job failed');
  if (job.attempts >= MAX_ATTEMPTS) {
    await giveUp(context, actor, job);
    return 'given up';
  }
  await updateJob(context.tenant, job, { status: 'queued' });
  return 'to be tried again';
}

async function giveUp(context: JobContext, actor: Actor, job: JobRow): Promise<void> {
  const { code, message: detail } = new Problem('job_given_up');
  await endJob(context, actor, job, { status: 'failed', problem: { code, detail } });
}
