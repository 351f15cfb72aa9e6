import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  foreignKey,
  index,
  integer,
  json,
  jsonb,
  pgTable,
  primaryKey,
  text,
  uuid,
} from 'drizzle-orm/pg-core';
import { instant, organizationId, tenantPolicy } from './columns';
import { jobs } from './jobs';
import { projects } from './projects';

/** What an adjustment was asked for. */
export interface AdjustmentRequest {
  setups: 'all' | string[];
  /** Null = none. */
  levelRuns: 'all' | string[] | null;
  datum: { kind: 'held' | 'weighted' | 'free'; points: string[] | null };
  snooping: boolean;
  since: string | null;
  until: string | null;
}

/** Networks to be adjusted; what came of each stands in adjustment_results. */
export const adjustments = pgTable(
  'adjustments',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    projectId: uuid('project_id').notNull(),
    jobId: uuid('job_id').notNull(),
    name: text('name').notNull(),
    request: jsonb('request').$type<AdjustmentRequest>().notNull(),
    createdBy: text('created_by').notNull(),
    createdByPersonId: uuid('created_by_person_id').notNull(),
    createdAt: instant('created_at').notNull(),
    appliedAt: instant('applied_at'),
    appliedBy: text('applied_by'),
    appliedNote: text('applied_note'),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    index('adjustments_project').on(t.organizationId, t.projectId, t.id),
    foreignKey({
      columns: [t.organizationId, t.projectId],
      foreignColumns: [projects.organizationId, projects.id],
    }),
    foreignKey({ columns: [t.organizationId, t.jobId], foreignColumns: [jobs.organizationId, jobs.id] }),
    tenantPolicy(t.organizationId),
  ],
);

/** Results of adjustments; SI units. Append-only. */
export const adjustmentResults = pgTable(
  'adjustment_results',
  {
    organizationId: organizationId(),
    adjustmentId: uuid('adjustment_id').notNull(),
    method: text('method').notNull(),
    methodVersion: text('method_version').notNull(),
    verdict: text('verdict').$type<'pass' | 'hold' | 'fail'>().notNull(),
    /** lib/services/adjustments/result.ts gives the shapes. Kept as text: nothing looks inside them here. */
    result: json('result').notNull(),
    /** Everything that the computation was given, so that it can be repeated and compared. */
    input: json('input').notNull(),
    computedAt: instant('computed_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.adjustmentId] }),
    foreignKey({
      columns: [t.organizationId, t.adjustmentId],
      foreignColumns: [adjustments.organizationId, adjustments.id],
    }),
    check('adjustment_results_verdict', sql`${t.verdict} in ('pass', 'hold', 'fail')`),
    tenantPolicy(t.organizationId),
  ],
);

/** Observations of an adjustment one by one, in the order of the computation; SI units. Append-only. */
export const adjustmentObservations = pgTable(
  'adjustment_observations',
  {
    organizationId: organizationId(),
    adjustmentId: uuid('adjustment_id').notNull(),
    seq: integer('seq').notNull(),
    kind: text('kind').notNull(),
    fromPoint: text('from_point'),
    toPoint: text('to_point'),
    removed: boolean('removed').notNull(),
    observation: json('observation').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.adjustmentId, t.seq] }),
    foreignKey({
      columns: [t.organizationId, t.adjustmentId],
      foreignColumns: [adjustmentResults.organizationId, adjustmentResults.adjustmentId],
    }),
    tenantPolicy(t.organizationId),
  ],
);
