import { sql } from 'drizzle-orm';
import { bigint, check, index, jsonb, pgTable, primaryKey, text, uuid } from 'drizzle-orm/pg-core';
import { instant, organizationId, tenantPolicy, xid8 } from './columns';

/**
 * What happened, in commit order: `seq` is taken before commit, so readers order by the transaction first and see
 * only transactions below the oldest running one. Append-only.
 */
export const events = pgTable(
  'events',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    xid: xid8('xid').notNull().default(sql`pg_current_xact_id()`),
    seq: bigint('seq', { mode: 'number' }).generatedAlwaysAsIdentity(),
    type: text('type').notNull(),
    subject: text('subject').notNull(),
    projectId: uuid('project_id'),
    data: jsonb('data').notNull(),
    occurredAt: instant('occurred_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    index('events_order').on(t.organizationId, t.xid, t.seq),
    tenantPolicy(t.organizationId),
  ],
);

/** Who did what. Append-only. */
export const auditEntries = pgTable(
  'audit_entries',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    action: text('action').notNull(),
    subject: text('subject').notNull(),
    projectId: uuid('project_id'),
    actorKind: text('actor_kind').$type<'person' | 'key' | 'job'>().notNull(),
    actorId: uuid('actor_id'),
    actorName: text('actor_name').notNull(),
    requestId: text('request_id'),
    details: jsonb('details').notNull(),
    occurredAt: instant('occurred_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    check('audit_entries_actor_kind', sql`${t.actorKind} in ('person', 'key', 'job')`),
    tenantPolicy(t.organizationId),
  ],
);
