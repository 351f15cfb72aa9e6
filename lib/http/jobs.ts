import { API_BASE } from '@/openapi/base';
import type { Job } from '@/openapi/schemas/job';

/** A job is young for so long: it may end at any moment, and asking often is fair. */
const YOUNG_MS = 10_000;

/** Headers of an answer that is a job: where it is, and when to ask again while it has not ended. */
export function jobHeaders(status: number, job: Job, now: Date): Record<string, string> {
  const ended = job.finishedAt !== null;
  const young = now.getTime() - new Date(job.createdAt).getTime() < YOUNG_MS;
  return {
    ...(status === 202 ? { Location: `${API_BASE}/jobs/${job.id}` } : {}),
    ...(ended ? {} : { 'Retry-After': young ? '1' : '5' }),
  };
}
