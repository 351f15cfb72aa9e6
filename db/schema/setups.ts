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
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core';
import { bytea, instant, organizationId, tenantPolicy } from './columns';
import { instruments, projects } from './projects';
import { uploads } from './uploads';

export const setups = pgTable(
  'setups',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    projectId: uuid('project_id').notNull(),
    clientId: text('client_id').notNull(),
    uploadId: uuid('upload_id').notNull(),
    /** The setup whose observations these are: itself, or the first of a chain of refits. */
    rootId: uuid('root_id').notNull(),
    station: text('station').notNull(),
    method: text('method').$type<'resection' | 'identify' | 'backsight'>().notNull(),
    instrumentId: uuid('instrument_id').notNull(),
    instrumentName: text('instrument_name').notNull(),
    calibrationVersion: integer('calibration_version').notNull(),
    instrumentHeight: doublePrecision('instrument_height'),
    toleranceClass: text('tolerance_class').notNull(),
    temperature: doublePrecision('temperature'),
    pressure: doublePrecision('pressure'),
    humidity: doublePrecision('humidity'),
    observedAt: instant('observed_at').notNull(),
    resultVersion: integer('result_version').notNull(),
    verdict: text('verdict').$type<'pass' | 'hold' | 'fail'>().notNull(),
    /** Expiry is derived from validUntil when read. */
    state: text('state').$type<'computed' | 'released' | 'withdrawn' | 'superseded'>().notNull(),
    releasedAt: instant('released_at'),
    validUntil: instant('valid_until'),
    withdrawnAt: instant('withdrawn_at'),
    supersedesId: uuid('supersedes_id'),
    supersededById: uuid('superseded_by_id'),
    excluded: jsonb('excluded').$type<{ shot: string; reason: string }[]>().notNull(),
    submittedBy: text('submitted_by').notNull(),
    submitterPersonId: uuid('submitter_person_id').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    unique('setups_client_id').on(t.organizationId, t.projectId, t.clientId),
    index('setups_project').on(t.organizationId, t.projectId, t.id),
    index('setups_upload').on(t.organizationId, t.uploadId),
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
    foreignKey({ columns: [t.organizationId, t.supersedesId], foreignColumns: [t.organizationId, t.id] }),
    foreignKey({ columns: [t.organizationId, t.supersededById], foreignColumns: [t.organizationId, t.id] }),
    check('setups_verdict', sql`${t.verdict} in ('pass', 'hold', 'fail')`),
    check('setups_state', sql`${t.state} in ('computed', 'released', 'withdrawn', 'superseded')`),
    tenantPolicy(t.organizationId),
  ],
);

/** Results of a setup, version by version: a new one supersedes. Append-only. */
export const setupResults = pgTable(
  'setup_results',
  {
    organizationId: organizationId(),
    setupId: uuid('setup_id').notNull(),
    version: integer('version').notNull(),
    method: text('method').notNull(),
    methodVersion: text('method_version').notNull(),
    /** lib/services/setups/result.ts gives its shape; SI units. Kept as text: nothing looks inside it here. */
    result: json('result').notNull(),
    computedAt: instant('computed_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.setupId, t.version] }),
    foreignKey({
      columns: [t.organizationId, t.setupId],
      foreignColumns: [setups.organizationId, setups.id],
    }),
    tenantPolicy(t.organizationId),
  ],
);

export const setupChecks = pgTable(
  'setup_checks',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    projectId: uuid('project_id').notNull(),
    setupId: uuid('setup_id').notNull(),
    uploadId: uuid('upload_id').notNull(),
    /** Null for the check shots of the setup's own upload. */
    clientId: text('client_id'),
    purpose: text('purpose').$type<'check' | 'closing'>().notNull(),
    agreed: boolean('agreed').notNull(),
    /** Differences target by target; SI units. */
    result: json('result').notNull(),
    observedAt: instant('observed_at').notNull(),
    /** Result version of the setup with this check. */
    resultVersion: integer('result_version').notNull(),
    /** The check whose shots these are, where a refit judged it again; null for a check as it came in. */
    carriedFromId: uuid('carried_from_id'),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    uniqueIndex('setup_checks_client_id')
      .on(t.organizationId, t.projectId, t.clientId)
      .where(sql`${t.carriedFromId} is null`),
    index('setup_checks_setup').on(t.organizationId, t.setupId),
    index('setup_checks_upload').on(t.organizationId, t.uploadId),
    foreignKey({
      columns: [t.organizationId, t.setupId],
      foreignColumns: [setups.organizationId, setups.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.uploadId],
      foreignColumns: [uploads.organizationId, uploads.id],
    }),
    foreignKey({ columns: [t.organizationId, t.carriedFromId], foreignColumns: [t.organizationId, t.id] }),
    check('setup_checks_purpose', sql`${t.purpose} in ('check', 'closing')`),
    tenantPolicy(t.organizationId),
  ],
);

/** Shots of setups and of their checks; radians and metres. Append-only. */
export const observations = pgTable(
  'observations',
  {
    organizationId: organizationId(),
    setupId: uuid('setup_id').notNull(),
    clientId: text('client_id').notNull(),
    projectId: uuid('project_id').notNull(),
    checkId: uuid('check_id'),
    seq: integer('seq').notNull(),
    /** As it was named or, where `identified`, found; null for a stray. */
    target: text('target'),
    /** It was sent without a name, to be identified. */
    identified: boolean('identified').notNull(),
    purpose: text('purpose').$type<'orient' | 'check' | 'closing'>().notNull(),
    face: text('face').$type<'left' | 'right'>().notNull(),
    set: integer('set').notNull(),
    direction: doublePrecision('direction'),
    zenith: doublePrecision('zenith'),
    slopeDistance: doublePrecision('slope_distance'),
    prismConstantMm: doublePrecision('prism_constant_mm'),
    prismConstantAppliedMm: doublePrecision('prism_constant_applied_mm'),
    appliedPpm: doublePrecision('applied_ppm'),
    targetHeight: doublePrecision('target_height').notNull(),
    targetCentringSigma: doublePrecision('target_centring_sigma'),
    targetHeightSigma: doublePrecision('target_height_sigma'),
    distanceMode: text('distance_mode').$type<'prism' | 'reflectorless'>().notNull(),
    compensator: text('compensator').$type<'on' | 'off'>().notNull(),
    observedAt: instant('observed_at'),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.setupId, t.clientId] }),
    index('observations_target').on(t.organizationId, t.projectId, t.target),
    foreignKey({
      columns: [t.organizationId, t.setupId],
      foreignColumns: [setups.organizationId, setups.id],
    }),
    check('observations_face', sql`${t.face} in ('left', 'right')`),
    tenantPolicy(t.organizationId),
  ],
);

/** Releases and withdrawals of a setup in their order. Append-only. */
export const setupReleases = pgTable(
  'setup_releases',
  {
    organizationId: organizationId(),
    setupId: uuid('setup_id').notNull(),
    seq: integer('seq').notNull(),
    action: text('action').$type<'release' | 'withdraw'>().notNull(),
    machine: text('machine'),
    layerName: text('layer_name'),
    layerVersion: integer('layer_version'),
    surfaceSha256: bytea('surface_sha256'),
    offset: doublePrecision('offset'),
    note: text('note'),
    /** When it took force on site, and when the hub was told. */
    effectiveAt: instant('effective_at').notNull(),
    recordedAt: instant('recorded_at').notNull(),
    validUntil: instant('valid_until'),
    personId: uuid('person_id').notNull(),
    actorName: text('actor_name').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.setupId, t.seq] }),
    foreignKey({
      columns: [t.organizationId, t.setupId],
      foreignColumns: [setups.organizationId, setups.id],
    }),
    check('setup_releases_action', sql`${t.action} in ('release', 'withdraw')`),
    tenantPolicy(t.organizationId),
  ],
);

/** What a machine's crew must answer after a withdrawal. */
export const acknowledgements = pgTable(
  'acknowledgements',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    projectId: uuid('project_id').notNull(),
    setupId: uuid('setup_id').notNull(),
    machine: text('machine').notNull(),
    reason: text('reason'),
    openedAt: instant('opened_at').notNull(),
    acknowledgedAt: instant('acknowledged_at'),
    acknowledgedBy: text('acknowledged_by'),
    note: text('note'),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    index('acknowledgements_project').on(t.organizationId, t.projectId, t.id),
    foreignKey({
      columns: [t.organizationId, t.setupId],
      foreignColumns: [setups.organizationId, setups.id],
    }),
    tenantPolicy(t.organizationId),
  ],
);
