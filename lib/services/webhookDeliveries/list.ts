import { and, desc, eq, lt } from 'drizzle-orm';
import { webhookDeliveries } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadEndpoint } from '@/lib/services/webhookEndpoints/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/webhooks';
import { lastAttempts } from './load';
import { presentDelivery } from './present';

type List = typeof contract.listWebhookDeliveries;

/** What became of the messages to an endpoint, newest first. */
export async function listWebhookDeliveries(
  context: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const { tenant, caller } = context;
  const { organizationId } = caller;
  const endpoint = await loadEndpoint(context, params.webhookEndpointId);
  const list = ['webhook-deliveries', endpoint.id, query.status, query.type];
  const after = readCursor(list, query.cursor);
  const rows = await tenant.db
    .select()
    .from(webhookDeliveries)
    .where(
      and(
        eq(webhookDeliveries.organizationId, organizationId),
        eq(webhookDeliveries.endpointId, endpoint.id),
        after === null ? undefined : lt(webhookDeliveries.id, after),
        query.status ? eq(webhookDeliveries.status, query.status) : undefined,
        query.type ? eq(webhookDeliveries.eventType, query.type) : undefined,
      ),
    )
    .orderBy(desc(webhookDeliveries.id))
    .limit(query.limit + 1);
  const attempts = await lastAttempts(tenant, organizationId, rows);
  return pageOf(
    rows,
    query.limit,
    list,
    (row) => row.id,
    (row) => presentDelivery(row, attempts.get(row.id) ?? null),
  );
}
