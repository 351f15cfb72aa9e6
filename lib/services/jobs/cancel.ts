import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { record } from '@/lib/services/record';
import type { ParamsOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/jobs';
import { endJob, updateJob } from './end';
import { hasEnded, loadJob } from './load';
import { presentJob } from './present';

type Cancel = typeof contract.cancelJob;

/** Cancels a queued job at once; a running one is asked to stop before its next step. */
export async function cancelJob(context: VerbContext, { params }: { params: ParamsOf<Cancel> }) {
  const { tenant, caller, runtime } = context;
  const job = await loadJob(tenant, caller, params.jobId, true);
  if (job.status === 'cancelled') return presentJob(job);
  if (hasEnded(job))
    throw new Problem('job_finished', `The job ${job.status === 'failed' ? 'failed' : 'is done'}.`);
  if (job.status === 'queued') return presentJob(await endJob(context, caller, job, { status: 'cancelled' }));
  if (job.cancelRequestedAt !== null) return presentJob(job);
  record(context, caller, {
    type: 'job.cancelRequested',
    subject: job.id,
    projectId: job.projectId ?? undefined,
    data: { kind: job.kind, about: job.subjectId },
  });
  return presentJob(await updateJob(tenant, job, { cancelRequestedAt: runtime.now().toISOString() }));
}
