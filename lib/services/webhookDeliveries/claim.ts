import { and, eq, inArray, sql } from 'drizzle-orm';
import { webhookDeliveries, webhookEndpoints } from '@/db/schema';
import { tenantTransaction } from '@/db/tenant';
import { bodyOf } from '@/lib/notify/message';
import type { Runtime } from '@/lib/runtime';
import type { EndpointRow } from '@/lib/services/webhookEndpoints/load';
import { readMessage } from './message';
import type { DeliveryRow } from './rows';

/** How long a taken delivery is left to whoever took it: longer than an attempt and its settling can last. */
export const LEASE_MS = 60_000;

/** Earliest deliveries that are looked at for those whose endpoint has a place free. */
const LOOKED_AT = 500;

export interface Claimed {
  delivery: DeliveryRow;
  endpoint: EndpointRow;
  body: string;
}

export interface Room {
  /** Deliveries that may be taken. */
  places: number;
  /** Of these so many for one endpoint: a slow one does not take them all. */
  eachEndpoint: number;
  /** What each endpoint has under way already. */
  busy: ReadonlyMap<string, number>;
}

/**
 * Takes deliveries whose moment has come, by moving it on: whoever dies over one leaves it to the next. The attempt is
 * counted before it is made.
 */
export function claim(organizationId: string, runtime: Runtime, room: Room): Promise<Claimed[]> {
  const [endpoints, counts] = [[...room.busy.keys()], [...room.busy.values()]];
  const full = endpoints.filter((_, i) => counts[i] >= room.eachEndpoint);
  const now = runtime.now();
  const at = now.toISOString();
  const leased = new Date(now.getTime() + LEASE_MS).toISOString();
  return tenantTransaction(organizationId, async (tenant) => {
    const { rows } = await tenant.db.execute<{ id: string }>(sql`
      with earliest as (
        select id, endpoint_id, next_attempt_at from webhook_deliveries
        where organization_id = ${organizationId} and status = 'pending' and next_attempt_at <= ${at}
          and endpoint_id <> all(${sql.param(full)}::uuid[])
        order by next_attempt_at limit ${LOOKED_AT}
      ), placed as (
        select id, row_number() over (partition by endpoint_id order by next_attempt_at, id) as place from earliest
      ), taken as (
        select d.id from webhook_deliveries d join placed p on p.id = d.id
          left join unnest(${sql.param(endpoints)}::uuid[], ${sql.param(counts)}::int[]) as busy (endpoint_id, count)
            on busy.endpoint_id = d.endpoint_id
        where d.organization_id = ${organizationId} and p.place <= ${room.eachEndpoint} - coalesce(busy.count, 0)
          and d.status = 'pending' and d.next_attempt_at <= ${at}
        order by d.next_attempt_at, d.id limit ${room.places} for update of d skip locked
      )
      update webhook_deliveries set attempts = attempts + 1, next_attempt_at = ${leased}
      where organization_id = ${organizationId} and id in (select id from taken) returning id`);
    if (rows.length === 0) return [];
    const ids = rows.map(({ id }) => id);
    const found = await tenant.db
      .select({ delivery: webhookDeliveries, endpoint: webhookEndpoints })
      .from(webhookDeliveries)
      .innerJoin(
        webhookEndpoints,
        and(
          eq(webhookEndpoints.organizationId, webhookDeliveries.organizationId),
          eq(webhookEndpoints.id, webhookDeliveries.endpointId),
        ),
      )
      .where(and(eq(webhookDeliveries.organizationId, organizationId), inArray(webhookDeliveries.id, ids)));
    return Promise.all(
      found.map(async ({ delivery, endpoint }) => ({
        delivery,
        endpoint,
        body: bodyOf(await readMessage(tenant, delivery)),
      })),
    );
  });
}
