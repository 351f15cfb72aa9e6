import { sql } from 'drizzle-orm';
import {
  check,
  foreignKey,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  uuid,
} from 'drizzle-orm/pg-core';
import { organizations } from './access';
import { instant, organizationId, tenantPolicy } from './columns';
import { projects } from './projects';

/** Where work stands: a code, and how many of its steps are done. */
export interface JobProgress {
  step: string;
  done: number;
  of: number;
}

/** Why work failed, as it is answered in a problem document. */
export interface JobProblem {
  code: string;
  detail: string;
  errors?: { pointer: string; code: string; detail: string; fix: string }[];
}

/**
 * Work that takes longer than a request. The queue carries the ids of a row and nothing else: what is to be done, how
 * far it is and what came of it stand here and with the subject.
 */
export const jobs = pgTable(
  'jobs',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    projectId: uuid('project_id'),
    kind: text('kind').$type<'adjustment'>().notNull(),
    /** What the work is for and its result is kept under. */
    subjectId: uuid('subject_id').notNull(),
    status: text('status').$type<'queued' | 'running' | 'succeeded' | 'failed' | 'cancelled'>().notNull(),
    /** Counts who took it. Whoever writes for an earlier count has been overtaken and is refused. */
    attempts: integer('attempts').notNull(),
    progress: jsonb('progress').$type<JobProgress | null>(),
    problem: jsonb('problem').$type<JobProblem | null>(),
    requestId: text('request_id').notNull(),
    createdBy: text('created_by').notNull(),
    createdAt: instant('created_at').notNull(),
    startedAt: instant('started_at'),
    finishedAt: instant('finished_at'),
    cancelRequestedAt: instant('cancel_requested_at'),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    foreignKey({ columns: [t.organizationId], foreignColumns: [organizations.id] }),
    foreignKey({
      columns: [t.organizationId, t.projectId],
      foreignColumns: [projects.organizationId, projects.id],
    }),
    index('jobs_project').on(t.organizationId, t.projectId, t.id),
    check('jobs_status', sql`${t.status} in ('queued', 'running', 'succeeded', 'failed', 'cancelled')`),
    tenantPolicy(t.organizationId),
  ],
);
