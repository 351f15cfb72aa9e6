import { jobs } from '@/db/schema';
import { enqueue } from '@/lib/jobs/queue';
import type { VerbContext } from '@/lib/services/context';
import type { JobRow } from './load';

/** Writes a job and adds it to the queue, both in the caller's transaction. */
export async function startJob(
  { tenant, caller, runtime, requestId }: VerbContext,
  { kind, projectId, subjectId }: Pick<JobRow, 'kind' | 'projectId' | 'subjectId'>,
): Promise<JobRow> {
  const { organizationId } = caller;
  const row: JobRow = {
    organizationId,
    id: runtime.uuid(),
    projectId,
    kind,
    subjectId,
    status: 'queued',
    attempts: 0,
    progress: null,
    problem: null,
    requestId,
    createdBy: caller.name,
    createdAt: runtime.now().toISOString(),
    startedAt: null,
    finishedAt: null,
    cancelRequestedAt: null,
  };
  await tenant.db.insert(jobs).values(row);
  await enqueue(tenant, { organizationId, jobId: row.id });
  return row;
}
