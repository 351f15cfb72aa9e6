import { and, eq } from 'drizzle-orm';
import { jobs } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { Actor } from '@/lib/access/actor';
import type { Runtime } from '@/lib/runtime';
import { record } from '@/lib/services/record';
import type { JobRow } from './load';

/** A transaction in which something happens to a job. */
export interface JobContext {
  tenant: Tenant;
  runtime: Runtime;
  requestId: string;
}

/** Changes a job's row, which the transaction has locked, and answers it as it is then. */
export async function updateJob({ db }: Tenant, job: JobRow, changes: Partial<JobRow>): Promise<JobRow> {
  await db
    .update(jobs)
    .set(changes)
    .where(and(eq(jobs.organizationId, job.organizationId), eq(jobs.id, job.id)));
  return { ...job, ...changes };
}

/** Ends a job, and says so in the events. */
export async function endJob(
  context: JobContext,
  actor: Actor,
  job: JobRow,
  end: { status: 'succeeded' | 'cancelled' } | { status: 'failed'; problem: NonNullable<JobRow['problem']> },
): Promise<JobRow> {
  const { status } = end;
  const finishedAt = context.runtime.now().toISOString();
  const progress = status === 'succeeded' ? null : job.progress;
  const ended = await updateJob(context.tenant, job, { ...end, finishedAt, progress });
  record(context, actor, {
    type: `job.${status}`,
    subject: job.id,
    projectId: job.projectId ?? undefined,
    data: {
      kind: job.kind,
      about: job.subjectId,
      ...(end.status === 'failed' ? { code: end.problem.code, detail: end.problem.detail } : {}),
    },
  });
  return ended;
}
