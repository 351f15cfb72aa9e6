import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  doublePrecision,
  foreignKey,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { organizations } from './access';
import { instant, organizationId, tenantPolicy } from './columns';

export const projects = pgTable(
  'projects',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    name: text('name').notNull(),
    lengthUnit: text('length_unit').$type<'m' | 'ft' | 'ftUS'>().notNull(),
    frame: jsonb('frame').$type<{ kind: 'local' }>().notNull(),
    combinedFactor: doublePrecision('combined_factor').notNull(),
    siteElevation: doublePrecision('site_elevation'),
    refraction: doublePrecision('refraction').notNull(),
    refractionSigma: doublePrecision('refraction_sigma').notNull(),
    controlSigmaHorizontal: doublePrecision('control_sigma_horizontal').notNull(),
    controlSigmaVertical: doublePrecision('control_sigma_vertical').notNull(),
    positionSigmaHorizontal: doublePrecision('position_sigma_horizontal'),
    positionSigmaVertical: doublePrecision('position_sigma_vertical'),
    setupValidMinutes: integer('setup_valid_minutes').notNull(),
    displayDecimals: integer('display_decimals').notNull(),
    /** What level runs may fail to close by: m per √m or m per √setup; null for third order. */
    levelLimitPer: text('level_limit_per').$type<'length' | 'setup'>(),
    levelLimitFactor: doublePrecision('level_limit_factor'),
    levelLimitCitation: text('level_limit_citation'),
    createdAt: instant('created_at').notNull(),
    updatedAt: instant('updated_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    unique('projects_name').on(t.organizationId, t.name),
    foreignKey({ columns: [t.organizationId], foreignColumns: [organizations.id] }),
    check('projects_length_unit', sql`${t.lengthUnit} in ('m', 'ft', 'ftUS')`),
    check('projects_level_limit', sql`${t.levelLimitPer} in ('length', 'setup')`),
    tenantPolicy(t.organizationId),
  ],
);

/** Limits of a class of work, in metres. */
export const toleranceClasses = pgTable(
  'tolerance_classes',
  {
    organizationId: organizationId(),
    projectId: uuid('project_id').notNull(),
    name: text('name').notNull(),
    position: integer('position').notNull(),
    residualHorizontal: doublePrecision('residual_horizontal').notNull(),
    residualVertical: doublePrecision('residual_vertical').notNull(),
    workRadius: doublePrecision('work_radius').notNull(),
    workHorizontal: doublePrecision('work_horizontal').notNull(),
    workVertical: doublePrecision('work_vertical').notNull(),
    checkRequired: boolean('check_required').notNull(),
    citation: text('citation'),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.projectId, t.name] }),
    foreignKey({
      columns: [t.organizationId, t.projectId],
      foreignColumns: [projects.organizationId, projects.id],
    }),
    tenantPolicy(t.organizationId),
  ],
);

export const instruments = pgTable(
  'instruments',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    projectId: uuid('project_id').notNull(),
    name: text('name').notNull(),
    kind: text('kind').$type<'totalStation' | 'rover' | 'level' | 'machine'>().notNull(),
    serial: text('serial'),
    calibrationVersion: integer('calibration_version').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    unique('instruments_name').on(t.organizationId, t.projectId, t.name),
    foreignKey({
      columns: [t.organizationId, t.projectId],
      foreignColumns: [projects.organizationId, projects.id],
    }),
    check('instruments_kind', sql`${t.kind} in ('totalStation', 'rover', 'level', 'machine')`),
    tenantPolicy(t.organizationId),
  ],
);

/** Stated figures of an instrument, version by version; radians, metres and ppm. */
export const instrumentCalibrations = pgTable(
  'instrument_calibrations',
  {
    organizationId: organizationId(),
    instrumentId: uuid('instrument_id').notNull(),
    version: integer('version').notNull(),
    direction: doublePrecision('direction').notNull(),
    zenith: doublePrecision('zenith').notNull(),
    distance: doublePrecision('distance').notNull(),
    distancePpm: doublePrecision('distance_ppm').notNull(),
    accuracyStated: boolean('accuracy_stated').notNull(),
    collimation: doublePrecision('collimation').notNull(),
    instrumentCentring: doublePrecision('instrument_centring').notNull(),
    targetCentring: doublePrecision('target_centring').notNull(),
    targetHeight: doublePrecision('target_height').notNull(),
    carrierWavelength: doublePrecision('carrier_wavelength').notNull(),
    referenceRefractivity: doublePrecision('reference_refractivity').notNull(),
    /** Of a level: 1 km there and back (ISO 17123-2), as m per √m; null where nothing is stated. */
    levelSigma: doublePrecision('level_sigma'),
    note: text('note'),
    createdAt: instant('created_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.instrumentId, t.version] }),
    foreignKey({
      columns: [t.organizationId, t.instrumentId],
      foreignColumns: [instruments.organizationId, instruments.id],
    }),
    tenantPolicy(t.organizationId),
  ],
);
