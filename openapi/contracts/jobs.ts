import * as z from 'zod';
import { contract } from '@/openapi/contract';
import { JobParams } from '@/openapi/params';
import { Job, JobKind, JobPage, JobStatus } from '@/openapi/schemas/job';
import { Id, PageQuery } from '@/openapi/schemas/primitives';

const RETRY_AFTER = { 'Retry-After': 'Seconds to wait before asking again; only while it has not ended.' };

export const listJobs = contract({
  id: 'listJobs',
  method: 'get',
  path: '/jobs',
  tag: 'Jobs',
  summary: 'List jobs',
  description: 'Jobs of all projects that the caller may use, newest first.',
  access: 'jobs:read',
  query: z.strictObject({
    ...PageQuery.shape,
    projectId: Id.optional(),
    status: JobStatus.optional(),
    kind: JobKind.optional(),
  }),
  answers: { 200: { description: 'A page of jobs.', json: JobPage } },
  problems: ['cursor_invalid', 'not_found'],
});

export const getJob = contract({
  id: 'getJob',
  method: 'get',
  path: '/jobs/{jobId}',
  tag: 'Jobs',
  summary: 'Read a job',
  description:
    'How far it is. Ask again after the seconds in Retry-After until `status` is an end; then `result` leads to what came of it, or `problem` says why nothing did.',
  access: 'jobs:read',
  params: JobParams,
  answers: { 200: { description: 'The job.', json: Job, headers: RETRY_AFTER } },
});

export const cancelJob = contract({
  id: 'cancelJob',
  method: 'post',
  path: '/jobs/{jobId}/cancel',
  tag: 'Jobs',
  summary: 'Cancel a job',
  description:
    'A queued job is cancelled at once, a running one before its next step: `cancelRequested` is true until then. Nothing of a cancelled job is kept. Cancelling twice is harmless.',
  access: 'jobs:write',
  params: JobParams,
  answers: { 200: { description: 'The job.', json: Job, headers: RETRY_AFTER } },
  problems: ['job_finished'],
});
