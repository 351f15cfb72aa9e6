import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  doublePrecision,
  foreignKey,
  index,
  integer,
  json,
  jsonb,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { instant, organizationId, tenantPolicy } from './columns';
import { controlPointVersions } from './control';
import { instruments, projects } from './projects';
import { uploads } from './uploads';

/** Two-peg tests of levels; metres and radians. Append-only. */
export const pegTests = pgTable(
  'peg_tests',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    projectId: uuid('project_id').notNull(),
    clientId: text('client_id').notNull(),
    uploadId: uuid('upload_id').notNull(),
    instrumentId: uuid('instrument_id').notNull(),
    calibrationVersion: integer('calibration_version').notNull(),
    collimation: doublePrecision('collimation').notNull(),
    collimationSigma: doublePrecision('collimation_sigma').notNull(),
    verdict: text('verdict').$type<'pass' | 'hold' | 'fail'>().notNull(),
    /** Readings in metres, and all that came of them. */
    result: json('result').notNull(),
    methodVersion: text('method_version').notNull(),
    observedAt: instant('observed_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    unique('peg_tests_client_id').on(t.organizationId, t.projectId, t.clientId),
    index('peg_tests_instrument').on(t.organizationId, t.instrumentId, t.observedAt),
    index('peg_tests_upload').on(t.organizationId, t.uploadId),
    foreignKey({
      columns: [t.organizationId, t.projectId],
      foreignColumns: [projects.organizationId, projects.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.uploadId],
      foreignColumns: [uploads.organizationId, uploads.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.instrumentId],
      foreignColumns: [instruments.organizationId, instruments.id],
    }),
    check('peg_tests_verdict', sql`${t.verdict} in ('pass', 'hold', 'fail')`),
    tenantPolicy(t.organizationId),
  ],
);

/** Level runs; metres. Append-only. */
export const levelRuns = pgTable(
  'level_runs',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    projectId: uuid('project_id').notNull(),
    clientId: text('client_id').notNull(),
    uploadId: uuid('upload_id').notNull(),
    fromPoint: text('from_point').notNull(),
    /** The last point, a control point or not. */
    toPoint: text('to_point').notNull(),
    instrumentId: uuid('instrument_id'),
    instrumentName: text('instrument_name'),
    calibrationVersion: integer('calibration_version'),
    pegTestId: uuid('peg_test_id'),
    staff: text('staff'),
    /** The book in metres. */
    sights: jsonb('sights').notNull(),
    verdict: text('verdict').$type<'pass' | 'hold' | 'fail'>().notNull(),
    result: json('result').notNull(),
    methodVersion: text('method_version').notNull(),
    observedAt: instant('observed_at').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    unique('level_runs_client_id').on(t.organizationId, t.projectId, t.clientId),
    index('level_runs_project').on(t.organizationId, t.projectId, t.id),
    index('level_runs_upload').on(t.organizationId, t.uploadId),
    foreignKey({
      columns: [t.organizationId, t.projectId],
      foreignColumns: [projects.organizationId, projects.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.uploadId],
      foreignColumns: [uploads.organizationId, uploads.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.instrumentId],
      foreignColumns: [instruments.organizationId, instruments.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.pegTestId],
      foreignColumns: [pegTests.organizationId, pegTests.id],
    }),
    check('level_runs_verdict', sql`${t.verdict} in ('pass', 'hold', 'fail')`),
    tenantPolicy(t.organizationId),
  ],
);

/**
 * What level runs say of the control points on their way, a row a mark; metres. What a point's health is read from,
 * beside the shots of setups. Append-only.
 */
export const levelDifferences = pgTable(
  'level_differences',
  {
    organizationId: organizationId(),
    levelRunId: uuid('level_run_id').notNull(),
    /** Line of the book; a mark may be passed twice. */
    line: integer('line').notNull(),
    projectId: uuid('project_id').notNull(),
    point: text('point').notNull(),
    pointVersion: integer('point_version').notNull(),
    /** An `end` shares its difference, the misclosure, with the start. */
    role: text('role').$type<'passed' | 'end'>().notNull(),
    published: doublePrecision('published').notNull(),
    /** Levelled minus published. */
    difference: doublePrecision('difference').notNull(),
    /** Of the difference: the levelled height and the published one. */
    standardDeviation: doublePrecision('standard_deviation').notNull(),
    agrees: boolean('agrees').notNull(),
    observedAt: instant('observed_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.levelRunId, t.line] }),
    index('level_differences_point').on(t.organizationId, t.projectId, t.point, t.observedAt),
    foreignKey({
      columns: [t.organizationId, t.levelRunId],
      foreignColumns: [levelRuns.organizationId, levelRuns.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.projectId, t.point, t.pointVersion],
      foreignColumns: [
        controlPointVersions.organizationId,
        controlPointVersions.projectId,
        controlPointVersions.name,
        controlPointVersions.version,
      ],
    }),
    check('level_differences_role', sql`${t.role} in ('passed', 'end')`),
    tenantPolicy(t.organizationId),
  ],
);
