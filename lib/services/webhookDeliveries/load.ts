import { and, desc, eq, inArray } from 'drizzle-orm';
import { webhookAttempts, webhookDeliveries } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { loadEndpoint } from '@/lib/services/webhookEndpoints/load';
import type { AttemptRow, DeliveryRow } from './rows';

export interface DeliveryParams {
  webhookEndpointId: string;
  deliveryId: string;
}

/**
 * @param lock the endpoint, until the end of the transaction
 * @throws Problem where the organization has no such endpoint, or the endpoint no such delivery
 */
export async function loadDelivery(
  context: VerbContext,
  { webhookEndpointId, deliveryId }: DeliveryParams,
  lock = false,
) {
  const { tenant, caller } = context;
  const endpoint = await loadEndpoint(context, webhookEndpointId, lock);
  const [row] = await tenant.db
    .select()
    .from(webhookDeliveries)
    .where(
      and(
        eq(webhookDeliveries.organizationId, caller.organizationId),
        eq(webhookDeliveries.endpointId, endpoint.id),
        eq(webhookDeliveries.id, deliveryId),
      ),
    );
  if (!row) throw new Problem('not_found', 'There is no such delivery.');
  return { endpoint, row };
}

/** The last attempt of each delivery that has any. */
export async function lastAttempts(
  tenant: Tenant,
  organizationId: string,
  deliveries: readonly DeliveryRow[],
): Promise<Map<string, AttemptRow>> {
  if (deliveries.length === 0) return new Map();
  const ids = deliveries.map(({ id }) => id);
  const rows = await tenant.db
    .selectDistinctOn([webhookAttempts.deliveryId])
    .from(webhookAttempts)
    .where(and(eq(webhookAttempts.organizationId, organizationId), inArray(webhookAttempts.deliveryId, ids)))
    .orderBy(webhookAttempts.deliveryId, desc(webhookAttempts.number));
  return new Map(rows.map((row) => [row.deliveryId, row]));
}
