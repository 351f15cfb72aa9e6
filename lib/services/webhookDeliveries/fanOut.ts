import { and, asc, eq, sql } from 'drizzle-orm';
import { events, organizations, webhookEndpoints } from '@/db/schema';
import { type Tenant, tenantTransaction } from '@/db/tenant';
import type { Runtime } from '@/lib/runtime';
import { wants } from '@/lib/services/webhookEndpoints/filters';
import { type EndpointRow, sameEndpoint } from '@/lib/services/webhookEndpoints/load';
import { tipOf } from '@/lib/services/webhookEndpoints/tip';
import { enqueue, newDelivery } from './rows';

/** Events that an endpoint is moved on by in one transaction. */
const PAGE = 500;

/**
 * Makes deliveries of what has happened since each endpoint of an organization was last looked at. Place and
 * deliveries are of one transaction, so that nothing is skipped or told twice; an endpoint that another worker is
 * about to move on is left to it.
 *
 * @returns whether there is more to look at
 */
export function fanOut(organizationId: string, runtime: Runtime): Promise<boolean> {
  return tenantTransaction(organizationId, async (tenant) => {
    const rows = await tenant.db
      .select({ endpoint: webhookEndpoints, epoch: organizations.eventEpoch })
      .from(webhookEndpoints)
      .innerJoin(organizations, eq(organizations.id, webhookEndpoints.organizationId))
      .where(and(eq(webhookEndpoints.organizationId, organizationId), eq(webhookEndpoints.enabled, true)))
      .for('no key update', { of: webhookEndpoints, skipLocked: true });
    let more = false;
    for (const { endpoint, epoch } of rows) {
      // After a restore transactions are counted anew: the place means nothing any more.
      if (epoch !== endpoint.cursorEpoch) await move(tenant, endpoint, await tipOf(tenant, organizationId));
      else if (await moveOn(tenant, endpoint, runtime)) more = true;
    }
    return more;
  });
}

/** Answers whether more events than a page were waiting. */
async function moveOn(tenant: Tenant, endpoint: EndpointRow, runtime: Runtime): Promise<boolean> {
  const { organizationId, cursorXid, cursorSeq } = endpoint;
  const page = await tenant.db
    .select({
      id: events.id,
      xid: events.xid,
      seq: events.seq,
      type: events.type,
      projectId: events.projectId,
    })
    .from(events)
    .where(
      and(
        eq(events.organizationId, organizationId),
        sql`${events.xid} < pg_snapshot_xmin(pg_current_snapshot())`,
        sql`(${events.xid}, ${events.seq}) > (${cursorXid}::xid8, ${cursorSeq}::bigint)`,
      ),
    )
    .orderBy(asc(events.xid), asc(events.seq))
    .limit(PAGE);
  const last = page.at(-1);
  if (!last) return false;
  await enqueue(
    tenant,
    page
      .filter((event) => wants(endpoint, event))
      .map(({ id, type, projectId }) =>
        newDelivery(runtime, endpoint, { kind: 'event', eventId: id, eventType: type, projectId }),
      ),
  );
  await move(tenant, endpoint, { cursorXid: last.xid, cursorSeq: last.seq });
  return page.length === PAGE;
}

async function move(
  tenant: Tenant,
  { organizationId, id }: EndpointRow,
  place: Partial<Pick<EndpointRow, 'cursorEpoch' | 'cursorXid' | 'cursorSeq'>>,
): Promise<void> {
  await tenant.db.update(webhookEndpoints).set(place).where(sameEndpoint(organizationId, id));
}
