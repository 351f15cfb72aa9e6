import { systemRuntime } from '@/lib/runtime';
import { runJob } from '@/lib/services/jobs/run';

/** Does a queued job as a worker would, in this process: tests/faults has real workers. */
export function runJobOf({ organizationId }: { organizationId: string }, jobId: string): Promise<string> {
  return runJob(systemRuntime, { organizationId, jobId });
}
