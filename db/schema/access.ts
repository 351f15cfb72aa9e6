import { sql } from 'drizzle-orm';
import {
  boolean,
  check,
  foreignKey,
  index,
  integer,
  pgTable,
  primaryKey,
  text,
  unique,
  uuid,
} from 'drizzle-orm/pg-core';
import { bytea, instant, organizationId, tenantPolicy } from './columns';

/**
 * The one table outside the tenants: from the hash of an e-mail address, key, session or invitation to its
 * organization, so that the tenant is known before any tenant row is read. Webhook endpoints stand in it, too, so that
 * whoever delivers knows which organizations have any.
 */
export const directory = pgTable(
  'directory',
  {
    handleSha256: bytea('handle_sha256').primaryKey(),
    organizationId: organizationId(),
    kind: text('kind').$type<'email' | 'apiKey' | 'session' | 'invitation' | 'webhook'>().notNull(),
    subjectId: uuid('subject_id').notNull(),
  },
  (t) => [check('directory_kind', sql`${t.kind} in ('email', 'apiKey', 'session', 'invitation', 'webhook')`)],
);

export const organizations = pgTable(
  'organizations',
  {
    id: uuid('id').primaryKey(),
    name: text('name').notNull(),
    /** Grows with every restore, so that cursors from before it are told apart. */
    eventEpoch: integer('event_epoch').notNull().default(1),
    createdAt: instant('created_at').notNull(),
  },
  (t) => [tenantPolicy(t.id)],
);

export const people = pgTable(
  'people',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    name: text('name').notNull(),
    email: text('email').notNull(),
    role: text('role').$type<'admin' | 'surveyor' | 'foreman' | 'inspector' | 'analyst'>().notNull(),
    status: text('status').$type<'invited' | 'active' | 'closed'>().notNull(),
    passwordHash: text('password_hash'),
    invitationSha256: bytea('invitation_sha256'),
    invitationExpiresAt: instant('invitation_expires_at'),
    createdAt: instant('created_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    unique('people_email').on(t.organizationId, t.email),
    foreignKey({ columns: [t.organizationId], foreignColumns: [organizations.id] }),
    check('people_role', sql`${t.role} in ('admin', 'surveyor', 'foreman', 'inspector', 'analyst')`),
    check('people_status', sql`${t.status} in ('invited', 'active', 'closed')`),
    tenantPolicy(t.organizationId),
  ],
);

export const sessions = pgTable(
  'sessions',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    personId: uuid('person_id').notNull(),
    handleSha256: bytea('handle_sha256').notNull(),
    createdAt: instant('created_at').notNull(),
    expiresAt: instant('expires_at').notNull(),
    revokedAt: instant('revoked_at'),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    foreignKey({
      columns: [t.organizationId, t.personId],
      foreignColumns: [people.organizationId, people.id],
    }),
    index('sessions_person').on(t.organizationId, t.personId),
    tenantPolicy(t.organizationId),
  ],
);

export const apiKeys = pgTable(
  'api_keys',
  {
    organizationId: organizationId(),
    id: uuid('id').notNull(),
    name: text('name').notNull(),
    prefix: text('prefix').notNull(),
    secretSha256: bytea('secret_sha256').notNull(),
    scopes: text('scopes').array().notNull(),
    /** Null = all projects. */
    projectIds: uuid('project_ids').array(),
    responsiblePersonId: uuid('responsible_person_id').notNull(),
    createdAt: instant('created_at').notNull(),
    expiresAt: instant('expires_at'),
    revokedAt: instant('revoked_at'),
    lastUsedAt: instant('last_used_at'),
    successorId: uuid('successor_id'),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.id] }),
    foreignKey({
      columns: [t.organizationId, t.responsiblePersonId],
      foreignColumns: [people.organizationId, people.id],
    }),
    foreignKey({ columns: [t.organizationId, t.successorId], foreignColumns: [t.organizationId, t.id] }),
    tenantPolicy(t.organizationId),
  ],
);

export const idempotencyKeys = pgTable(
  'idempotency_keys',
  {
    organizationId: organizationId(),
    actorId: uuid('actor_id').notNull(),
    operation: text('operation').notNull(),
    key: text('key').notNull(),
    /** SHA-256 of path, query and body, decompressed. */
    fingerprint: bytea('fingerprint').notNull(),
    status: integer('status').notNull(),
    /** The answer as it was sent; null where it held a secret. */
    body: text('body'),
    secret: boolean('secret').notNull().default(false),
    createdAt: instant('created_at').notNull(),
    expiresAt: instant('expires_at').notNull(),
  },
  (t) => [
    primaryKey({ columns: [t.organizationId, t.actorId, t.operation, t.key] }),
    index('idempotency_keys_expiry').on(t.organizationId, t.expiresAt),
    tenantPolicy(t.organizationId),
  ],
);
