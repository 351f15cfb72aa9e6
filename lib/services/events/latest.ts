import { and, desc, eq, sql } from 'drizzle-orm';
import { events } from '@/db/schema';
import { directoryTransaction, tenantTransaction } from '@/db/tenant';

/** Below it everything that was committed can be read; while it stands still nothing new can. */
export function oldestTransaction(): Promise<string> {
  return directoryTransaction(async ({ db }) => {
    const { rows } = await db.execute<{ xid: string }>(
      sql`select pg_snapshot_xmin(pg_current_snapshot())::text as xid`,
    );
    return rows[0].xid;
  });
}

/**
 * The place of the last event of each organization that has any.
 *
 * @param seen the oldest running transaction of the last look: where it has not moved, nobody is asked
 */
export async function latestPlaces(organizationIds: readonly string[], seen: string) {
  const places = new Map<string, string>();
  const tip = await oldestTransaction();
  if (tip === seen) return { tip, places };
  for (const organizationId of organizationIds) {
    const [last] = await tenantTransaction(organizationId, ({ db }) =>
      db
        .select({ xid: events.xid, seq: events.seq })
        .from(events)
        .where(
          and(
            eq(events.organizationId, organizationId),
            sql`${events.xid} < pg_snapshot_xmin(pg_current_snapshot())`,
          ),
        )
        .orderBy(desc(events.xid), desc(events.seq))
        .limit(1),
    );
    if (last) places.set(organizationId, `${last.xid}/${last.seq}`);
  }
  return { tip, places };
}
