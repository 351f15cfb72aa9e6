import * as z from 'zod';
import { Id, Moment, page } from './primitives';
import { Problem } from './problem';

export const JobStatus = z.enum(['queued', 'running', 'succeeded', 'failed', 'cancelled']).meta({
  id: 'JobStatus',
  description: 'A queued job waits for a worker; the last three are ends.',
});
export const JobKind = z.enum(['adjustment']).meta({ id: 'JobKind', description: 'More kinds will follow.' });

export const Job = z
  .object({
    id: Id,
    kind: JobKind,
    status: JobStatus,
    projectId: Id.nullable(),
    progress: z
      .object({
        step: z.string().meta({ example: 'adjusting the network' }),
        done: z.int().meta({ description: 'Steps done.' }),
        of: z.int(),
      })
      .nullable()
      .meta({ description: 'What it is doing; null before it began and where it has ended well.' }),
    result: z.string().nullable().meta({
      description: 'Path of what came of it; null until it has succeeded.',
      example: '/api/v1/projects/0198f2b4-6c1e-7a35-9c0d-2b7f5d1e8a44/adjustments/0198f2b4-7d20-7c11-8e5f',
    }),
    problem: Problem.nullable().meta({ description: 'Why it failed; null elsewhere.' }),
    attempts: z.int().meta({ description: 'How often a worker took it up: more than once where one died.' }),
    cancelRequested: z.boolean(),
    createdBy: z.string(),
    createdAt: Moment,
    startedAt: Moment.nullable(),
    finishedAt: Moment.nullable(),
  })
  .meta({ id: 'Job', description: 'Work that takes longer than a request.' });

export const JobPage = page('JobPage', Job);

export type Job = z.output<typeof Job>;
