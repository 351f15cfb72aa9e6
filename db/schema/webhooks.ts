import { sql } from 'drizzle-orm';
import {
  bigint,
  boolean,
  check,
  foreignKey,
  index,
  integer,
  jsonb,
  pgTable,
  primaryKey,
  text,
  uniqueIndex,
  uuid,
} from 'drizzle-orm/pg-core';
import { organizations } from './access';
import { bytea, instant, organizationId, tenantPolicy, xid8 } from './columns';
import { events } from './record';

/**
 * Addresses that are told what happens. Events are the outbox: each endpoint keeps its place in their commit order,
 * so that an event costs nothing more where nobody listens.
 */
export const webhookEndpoints = pgTable(
  'webhook_endpoints',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    url: text('url').notNull(),
    description: text('description'),
    /** `setup.computed`, or `setup.*`; null = all. */
    eventTypes: text('event_types').array(),
    /** Null = all projects, and what belongs to none. */
    projectIds: uuid('project_ids').array(),
    enabled: boolean('enabled').notNull(),
    disabledAt: instant('disabled_at'),
    disabledReason: text('disabled_reason').$type<'by_request' | 'gone' | 'failing'>(),
    /** When deliveries began to fail without one that succeeded since. */
    failingSince: instant('failing_since'),
    lastDeliveredAt: instant('last_delivered_at'),
    /** Sealed with a key made of the hub's secret: signing needs the secret itself, not its hash. */
    secretSealed: bytea('secret_sealed').notNull(),
    secretMadeAt: instant('secret_made_at').notNull(),
    previousSecretSealed: bytea('previous_secret_sealed'),
    previousSecretEndsAt: instant('previous_secret_ends_at'),
    /** The last event that was looked at, with the epoch that a restore raises. */
    cursorEpoch: integer('cursor_epoch').notNull(),
    cursorXid: xid8('cursor_xid').notNull(),
    cursorSeq: bigint('cursor_seq', { mode: 'number' }).notNull(),
    createdAt: instant('created_at').notNull(),
    updatedAt: instant('updated_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    foreignKey({ columns: [t.organizationId], foreignColumns: [organizations.id] }),
    check('webhook_endpoints_disabled_reason', sql`${t.disabledReason} in ('by_request', 'gone', 'failing')`),
    tenantPolicy(t.organizationId),
  ],
);

/**
 * One message to one endpoint, and the queue of those to come: a delivery whose moment has come is taken by moving the
 * moment on, so that one whose worker died comes up again by itself.
 */
export const webhookDeliveries = pgTable(
  'webhook_deliveries',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    endpointId: uuid('endpoint_id').notNull(),
    kind: text('kind').$type<'event' | 'replay' | 'test'>().notNull(),
    /** Null for a test. */
    eventId: uuid('event_id'),
    eventType: text('event_type').notNull(),
    projectId: uuid('project_id'),
    status: text('status').$type<'pending' | 'delivered' | 'failed'>().notNull(),
    /** Why it was given up. */
    reason: text('reason').$type<'attempts_exhausted' | 'endpoint_gone' | 'endpoint_disabled'>(),
    attempts: integer('attempts').notNull(),
    /** When it is tried next, or may be taken from a worker that did not come back. */
    nextAttemptAt: instant('next_attempt_at'),
    createdAt: instant('created_at').notNull(),
    endedAt: instant('ended_at'),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    foreignKey({
      columns: [t.organizationId, t.endpointId],
      foreignColumns: [webhookEndpoints.organizationId, webhookEndpoints.id],
    }).onDelete('cascade'),
    foreignKey({
      columns: [t.organizationId, t.eventId],
      foreignColumns: [events.organizationId, events.id],
    }),
    // However often an event is looked at, it is told once.
    uniqueIndex('webhook_deliveries_event')
      .on(t.organizationId, t.endpointId, t.eventId)
      .where(sql`${t.kind} = 'event'`),
    index('webhook_deliveries_due').on(t.organizationId, t.nextAttemptAt).where(sql`${t.status} = 'pending'`),
    index('webhook_deliveries_list').on(t.organizationId, t.endpointId, t.id),
    check('webhook_deliveries_kind', sql`${t.kind} in ('event', 'replay', 'test')`),
    check('webhook_deliveries_status', sql`${t.status} in ('pending', 'delivered', 'failed')`),
    check(
      'webhook_deliveries_reason',
      sql`${t.reason} in ('attempts_exhausted', 'endpoint_gone', 'endpoint_disabled')`,
    ),
    tenantPolicy(t.organizationId),
  ],
);

/** What was sent and what came back, attempt by attempt. Never changed; it goes with its delivery. */
export const webhookAttempts = pgTable(
  'webhook_attempts',
  {
    organizationId: organizationId(),
    deliveryId: uuid('delivery_id').notNull(),
    number: integer('number').notNull(),
    startedAt: instant('started_at').notNull(),
    milliseconds: integer('milliseconds').notNull(),
    url: text('url').notNull(),
    /** The address that was checked and connected to. */
    address: text('address'),
    /** Without the signature. */
    headers: jsonb('headers').$type<Record<string, string>>().notNull(),
    failure: text('failure'),
    answerStatus: integer('answer_status'),
    answerHeaders: jsonb('answer_headers').$type<Record<string, string>>(),
    answerBody: text('answer_body'),
    answerTruncated: boolean('answer_truncated'),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.deliveryId, t.number] }),
    foreignKey({
      columns: [t.organizationId, t.deliveryId],
      foreignColumns: [webhookDeliveries.organizationId, webhookDeliveries.id],
    }).onDelete('cascade'),
    tenantPolicy(t.organizationId),
  ],
);
