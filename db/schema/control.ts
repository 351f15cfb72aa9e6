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
  uuid,
} from 'drizzle-orm/pg-core';
import { adjustments } from './adjustments';
import { instant, organizationId, tenantPolicy } from './columns';
import { projects } from './projects';

/** The last time that somebody, or the hub itself, said how far a point is to be trusted. */
export interface StatusAct {
  by: { kind: 'person' | 'key' | 'job'; name: string };
  at: string;
  note: string;
  /** What the hub saw, where it was the hub; metres. */
  seen: SeenDisplacement | null;
}

/** Where a mark stands minus where it was published, by several setups. */
export interface SeenDisplacement {
  version: number;
  easting: number;
  northing: number;
  elevation: number | null;
  /** 2 × 2 or 3 × 3, row by row. */
  covariance: number[];
  statistic: number;
  critical: number;
  /** Setups and level runs that agree with it, the first one first. */
  setups: string[];
  /** When the mark was last seen where it was published; null where it never was. */
  lastGoodAt: string | null;
}

export const controlPoints = pgTable(
  'control_points',
  {
    organizationId: organizationId(),
    projectId: uuid('project_id').notNull(),
    name: text('name').notNull(),
    currentVersion: integer('current_version').notNull(),
    status: text('status').$type<'trusted' | 'suspect' | 'quarantined'>().notNull(),
    /** Null as long as nobody has said anything. */
    statusAct: jsonb('status_act').$type<StatusAct>(),
    updatedAt: instant('updated_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.projectId, t.name] }),
    foreignKey({
      columns: [t.organizationId, t.projectId],
      foreignColumns: [projects.organizationId, projects.id],
    }),
    check('control_points_status', sql`${t.status} in ('trusted', 'suspect', 'quarantined')`),
    tenantPolicy(t.organizationId),
  ],
);

/** What was sent in, number for number, so that an answer in that unit echoes it exactly. */
export interface SubmittedControl {
  unit: 'm' | 'ft' | 'ftUS';
  easting: number;
  northing: number;
  elevation: number | null;
  sigma: { horizontal: number; vertical: number } | null;
}

/** Coordinates of a control point, version by version; metres. Append-only. */
export const controlPointVersions = pgTable(
  'control_point_versions',
  {
    organizationId: organizationId(),
    projectId: uuid('project_id').notNull(),
    name: text('name').notNull(),
    version: integer('version').notNull(),
    easting: doublePrecision('easting').notNull(),
    northing: doublePrecision('northing').notNull(),
    elevation: doublePrecision('elevation'),
    sigmaHorizontal: doublePrecision('sigma_horizontal').notNull(),
    sigmaVertical: doublePrecision('sigma_vertical').notNull(),
    kind: text('kind').$type<'control' | 'benchmark' | 'target'>().notNull(),
    description: text('description'),
    submitted: jsonb('submitted').$type<SubmittedControl>().notNull(),
    /** The adjustment that it comes from; null for one that was sent in. */
    adjustmentId: uuid('adjustment_id'),
    createdBy: text('created_by').notNull(),
    createdAt: instant('created_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.projectId, t.name, t.version] }),
    foreignKey({
      columns: [t.organizationId, t.projectId, t.name],
      foreignColumns: [controlPoints.organizationId, controlPoints.projectId, controlPoints.name],
    }),
    foreignKey({
      columns: [t.organizationId, t.adjustmentId],
      foreignColumns: [adjustments.organizationId, adjustments.id],
    }),
    check('control_point_versions_kind', sql`${t.kind} in ('control', 'benchmark', 'target')`),
    tenantPolicy(t.organizationId),
  ],
);
