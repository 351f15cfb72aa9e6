import { sql } from 'drizzle-orm';
import { type AnyPgColumn, customType, pgPolicy, pgRole, timestamp, uuid } from 'drizzle-orm/pg-core';

/** The role that web and worker connect as: it owns nothing but the queue's schema. */
export const appRole = pgRole('hubtack_app').existing();

export const bytea = customType<{ data: Buffer }>({ dataType: () => 'bytea' });

/** 64-bit transaction id; text in JavaScript. */
export const xid8 = customType<{ data: string }>({ dataType: () => 'xid8' });

/** Instants are read as text: a JavaScript Date would lose PostgreSQL's microseconds. */
export const instant = (name: string) =>
  timestamp(name, { withTimezone: true, precision: 6, mode: 'string' });

export const organizationId = () => uuid('organization_id').notNull();

/** A row is seen and written only within the organization that the transaction was opened for. */
export function tenantPolicy(column: AnyPgColumn) {
  const own = sql`${column} = (select nullif(current_setting('app.organization_id', true), '')::uuid)`;
  return pgPolicy('tenant', { as: 'permissive', for: 'all', to: appRole, using: own, withCheck: own });
}
