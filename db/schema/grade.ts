import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  doublePrecision,
  foreignKey,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { bytea, instant, organizationId, tenantPolicy } from './columns';
import { layers, surfaces } from './design';
import { projects } from './projects';
import { setups } from './setups';
import { uploads } from './uploads';

/** Checks of ground against a layer; metres. Append-only. */
export const gradeChecks = pgTable(
  'grade_checks',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    projectId: uuid('project_id').notNull(),
    clientId: text('client_id').notNull(),
    uploadId: uuid('upload_id').notNull(),
    layerName: text('layer_name').notNull(),
    layerVersion: integer('layer_version').notNull(),
    surfaceId: uuid('surface_id').notNull(),
    setupId: uuid('setup_id'),
    /** Result version of the setup that the point came from. */
    setupResultVersion: integer('setup_result_version'),
    /** The setup was in force when the shot was taken; true for shots by coordinates. */
    inForce: boolean('in_force').notNull(),
    independent: boolean('independent').notNull(),
    easting: doublePrecision('easting').notNull(),
    northing: doublePrecision('northing').notNull(),
    elevation: doublePrecision('elevation').notNull(),
    designElevation: doublePrecision('design_elevation'),
    deviation: doublePrecision('deviation'),
    deviationNormal: doublePrecision('deviation_normal'),
    standardDeviation: doublePrecision('standard_deviation'),
    probability: doublePrecision('probability'),
    verdict: text('verdict').$type<'pass' | 'hold' | 'fail'>().notNull(),
    /** Codes of the reasons. */
    reasons: text('reasons').array().notNull(),
    /** The polar reading in SI units; null for shots by coordinates. */
    reading: jsonb('reading'),
    observedAt: instant('observed_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    unique('grade_checks_client_id').on(t.organizationId, t.projectId, t.clientId),
    index('grade_checks_layer').on(t.organizationId, t.projectId, t.layerName, t.id),
    index('grade_checks_upload').on(t.organizationId, t.uploadId),
    index('grade_checks_setup').on(t.organizationId, t.setupId, t.observedAt),
    foreignKey({
      columns: [t.organizationId, t.projectId],
      foreignColumns: [projects.organizationId, projects.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.uploadId],
      foreignColumns: [uploads.organizationId, uploads.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.projectId, t.layerName, t.layerVersion],
      foreignColumns: [layers.organizationId, layers.projectId, layers.name, layers.version],
    }),
    foreignKey({
      columns: [t.organizationId, t.surfaceId],
      foreignColumns: [surfaces.organizationId, surfaces.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.setupId],
      foreignColumns: [setups.organizationId, setups.id],
    }),
    check('grade_checks_verdict', sql`${t.verdict} in ('pass', 'hold', 'fail')`),
    tenantPolicy(t.organizationId),
  ],
);

/** Checks of cutting edges on known elevations; metres. Append-only. */
export const benchChecks = pgTable(
  'bench_checks',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    projectId: uuid('project_id').notNull(),
    clientId: text('client_id').notNull(),
    uploadId: uuid('upload_id').notNull(),
    machine: text('machine').notNull(),
    setupId: uuid('setup_id'),
    benchmark: text('benchmark').notNull(),
    benchmarkVersion: integer('benchmark_version').notNull(),
    edge: text('edge').$type<'left' | 'right' | 'centre'>().notNull(),
    elevations: doublePrecision('elevations').array().notNull(),
    knownElevation: doublePrecision('known_elevation').notNull(),
    readElevation: doublePrecision('read_elevation').notNull(),
    spread: doublePrecision('spread'),
    difference: doublePrecision('difference').notNull(),
    tolerance: doublePrecision('tolerance').notNull(),
    layerName: text('layer_name'),
    layerVersion: integer('layer_version'),
    surfaceSha256: bytea('surface_sha256'),
    activeOffset: doublePrecision('active_offset'),
    correctionAppliedFor: text('correction_applied_for'),
    verdict: text('verdict').$type<'pass' | 'hold' | 'fail'>().notNull(),
    reasons: text('reasons').array().notNull(),
    observedAt: instant('observed_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    unique('bench_checks_client_id').on(t.organizationId, t.projectId, t.clientId),
    index('bench_checks_machine').on(t.organizationId, t.projectId, t.machine, t.id),
    index('bench_checks_upload').on(t.organizationId, t.uploadId),
    foreignKey({
      columns: [t.organizationId, t.projectId],
      foreignColumns: [projects.organizationId, projects.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.uploadId],
      foreignColumns: [uploads.organizationId, uploads.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.setupId],
      foreignColumns: [setups.organizationId, setups.id],
    }),
    check('bench_checks_edge', sql`${t.edge} in ('left', 'right', 'centre')`),
    check('bench_checks_verdict', sql`${t.verdict} in ('pass', 'hold', 'fail')`),
    tenantPolicy(t.organizationId),
  ],
);
