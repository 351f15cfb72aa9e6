import { sql } from 'drizzle-orm';
import {
  check,
  foreignKey,
  index,
  integer,
  pgTable,
  primaryKey,
  text,
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core';
import { bytea, instant, organizationId, tenantPolicy } from './columns';
import { projects } from './projects';

/** Bytes as they came. Append-only. */
export const rawBodies = pgTable(
  'raw_bodies',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    sha256: bytea('sha256').notNull(),
    /**
     * Of what was in an accepted compressed body: compressed anew, the same document is seldom the same bytes. Of a
     * table with what its address says beside it.
     */
    contentSha256: bytea('content_sha256'),
    bytes: bytea('bytes').notNull(),
    mediaType: text('media_type').notNull(),
    contentEncoding: text('content_encoding'),
    receivedAt: instant('received_at').notNull(),
  },
  (t) => [primaryKey({ columns: [t.organizationId, t.id] }), tenantPolicy(t.organizationId)],
);

export const uploads = pgTable(
  'uploads',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    projectId: uuid('project_id').notNull(),
    clientId: text('client_id'),
    status: text('status').$type<'processed' | 'refused'>().notNull(),
    rawBodyId: uuid('raw_body_id').notNull(),
    accepted: integer('accepted').notNull(),
    refused: integer('refused').notNull(),
    actorKind: text('actor_kind').notNull(),
    actorId: uuid('actor_id').notNull(),
    actorName: text('actor_name').notNull(),
    receivedAt: instant('received_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    uniqueIndex('uploads_client_id')
      .on(t.organizationId, t.projectId, t.clientId)
      .where(sql`${t.status} = 'processed'`),
    index('uploads_project').on(t.organizationId, t.projectId, t.id),
    foreignKey({
      columns: [t.organizationId, t.projectId],
      foreignColumns: [projects.organizationId, projects.id],
    }),
    foreignKey({
      columns: [t.organizationId, t.rawBodyId],
      foreignColumns: [rawBodies.organizationId, rawBodies.id],
    }),
    check('uploads_status', sql`${t.status} in ('processed', 'refused')`),
    tenantPolicy(t.organizationId),
  ],
);

/** What was not accepted of an upload, and why. Append-only. */
export const uploadRefusals = pgTable(
  'upload_refusals',
  {
    organizationId: organizationId(),
    uploadId: uuid('upload_id').notNull(),
    seq: integer('seq').notNull(),
    pointer: text('pointer').notNull(),
    code: text('code').notNull(),
    detail: text('detail').notNull(),
    fix: text('fix').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.uploadId, t.seq] }),
    foreignKey({
      columns: [t.organizationId, t.uploadId],
      foreignColumns: [uploads.organizationId, uploads.id],
    }),
    tenantPolicy(t.organizationId),
  ],
);
