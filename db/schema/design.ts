import { sql } from 'drizzle-orm';
import {
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
import { bytea, instant, organizationId, tenantPolicy } from './columns';
import { projects } from './projects';

/** Content of surfaces under the hash of it; lib/compute/grade/surfaceBytes.ts gives its shape. Append-only. */
export const surfaceData = pgTable(
  'surface_data',
  {
    organizationId: organizationId(),
    sha256: bytea('sha256').notNull(),
    bytes: bytea('bytes').notNull(),
  },
  (t) => [primaryKey({ columns: [t.organizationId, t.sha256] }), tenantPolicy(t.organizationId)],
);

export const surfaces = pgTable(
  'surfaces',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    projectId: uuid('project_id').notNull(),
    name: text('name').notNull(),
    represents: text('represents').$type<'finish' | 'subgrade' | 'base' | 'ground' | 'other'>().notNull(),
    kind: text('kind').$type<'tin' | 'plane'>().notNull(),
    sha256: bytea('sha256').notNull(),
    points: integer('points'),
    triangles: integer('triangles'),
    minEasting: doublePrecision('min_easting'),
    maxEasting: doublePrecision('max_easting'),
    minNorthing: doublePrecision('min_northing'),
    maxNorthing: doublePrecision('max_northing'),
    createdBy: text('created_by').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    unique('surfaces_content').on(t.organizationId, t.projectId, t.sha256, t.represents),
    foreignKey({
      columns: [t.organizationId, t.projectId],
      foreignColumns: [projects.organizationId, projects.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.sha256],
      foreignColumns: [surfaceData.organizationId, surfaceData.sha256],
    }),
    check('surfaces_kind', sql`${t.kind} in ('tin', 'plane')`),
    tenantPolicy(t.organizationId),
  ],
);

export type AcceptanceRule =
  | { rule: 'everyPoint'; citation: string }
  | { rule: 'window'; required: number; of: number; citation: string }
  | { rule: 'percentWithinLimits'; minimum: number; citation: string };

/** Layers version by version; metres. Append-only. */
export const layers = pgTable(
  'layers',
  {
    organizationId: organizationId(),
    projectId: uuid('project_id').notNull(),
    name: text('name').notNull(),
    version: integer('version').notNull(),
    surfaceId: uuid('surface_id').notNull(),
    offset: doublePrecision('offset').notNull(),
    below: doublePrecision('below').notNull(),
    above: doublePrecision('above').notNull(),
    citation: text('citation'),
    acceptance: jsonb('acceptance').$type<AcceptanceRule | null>(),
    createdBy: text('created_by').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.projectId, t.name, t.version] }),
    foreignKey({
      columns: [t.organizationId, t.projectId],
      foreignColumns: [projects.organizationId, projects.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.surfaceId],
      foreignColumns: [surfaces.organizationId, surfaces.id],
    }),
    tenantPolicy(t.organizationId),
  ],
);
