import { and, eq, type InferSelectModel } from 'drizzle-orm';
import { jobs } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { type Caller, mayUseProject } from '@/lib/access/actor';
import { Problem } from '@/lib/problem';

export type JobRow = InferSelectModel<typeof jobs>;

const NO_SUCH_JOB = 'There is no such job.';

/** A job by its id, whoever asks. */
export async function findJob(
  { db }: Tenant,
  organizationId: string,
  jobId: string,
  lock = false,
): Promise<JobRow | null> {
  const query = db
    .select()
    .from(jobs)
    .where(and(eq(jobs.organizationId, organizationId), eq(jobs.id, jobId)));
  const [row] = await (lock ? query.for('update') : query);
  return row ?? null;
}

/** @throws Problem where there is no such job, or it is of a project that the caller may not use */
export async function loadJob(tenant: Tenant, caller: Caller, jobId: string, lock = false): Promise<JobRow> {
  const row = await findJob(tenant, caller.organizationId, jobId, lock);
  const seen =
    row && (row.projectId === null ? caller.projectIds === null : mayUseProject(caller, row.projectId));
  if (!seen) throw new Problem('not_found', NO_SUCH_JOB);
  return row;
}

const ENDS: readonly JobRow['status'][] = ['succeeded', 'failed', 'cancelled'];

export function hasEnded({ status }: Pick<JobRow, 'status'>): boolean {
  return ENDS.includes(status);
}
