import { eq, sql } from 'drizzle-orm';
import { organizations } from '@/db/schema';
import type { Tenant } from '@/db/tenant';

/**
 * The place in the order of events from which everything that commits later follows: that of the oldest transaction
 * which still runs.
 */
export async function tipOf(tenant: Tenant, organizationId: string) {
  const [{ epoch, xid }] = await tenant.db
    .select({
      epoch: organizations.eventEpoch,
      xid: sql<string>`pg_snapshot_xmin(pg_current_snapshot())::text`,
    })
    .from(organizations)
    .where(eq(organizations.id, organizationId));
  return { cursorEpoch: epoch, cursorXid: xid, cursorSeq: 0 };
}
