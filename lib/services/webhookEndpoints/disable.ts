import { and, eq, ne } from 'drizzle-orm';
import { webhookDeliveries, webhookEndpoints } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { Runtime } from '@/lib/runtime';
import { record } from '@/lib/services/record';
import { type EndpointRow, sameEndpoint } from './load';

type Whose = Pick<EndpointRow, 'organizationId' | 'id'>;

/** What was still to come to an endpoint that is off is not sent; a replay can. */
export async function setPendingAside(
  tenant: Tenant,
  { organizationId, id }: Whose,
  at: string,
): Promise<void> {
  await tenant.db
    .update(webhookDeliveries)
    .set({ status: 'failed', reason: 'endpoint_disabled', nextAttemptAt: null, endedAt: at })
    .where(
      and(
        eq(webhookDeliveries.organizationId, organizationId),
        eq(webhookDeliveries.endpointId, id),
        eq(webhookDeliveries.status, 'pending'),
        ne(webhookDeliveries.kind, 'test'),
      ),
    );
}

/** Switches an endpoint off that its receiver gave up, or that gave up its receiver. */
export async function disableEndpoint(
  context: { tenant: Tenant; runtime: Runtime },
  endpoint: EndpointRow,
  reason: 'gone' | 'failing',
): Promise<void> {
  const { tenant, runtime } = context;
  const { organizationId, id } = endpoint;
  const at = runtime.now().toISOString();
  await tenant.db
    .update(webhookEndpoints)
    .set({ enabled: false, disabledAt: at, disabledReason: reason, updatedAt: at })
    .where(sameEndpoint(organizationId, id));
  await setPendingAside(tenant, endpoint, at);
  record(
    { ...context, requestId: null },
    { kind: 'job', organizationId, name: 'webhooks' },
    { type: 'webhookEndpoint.disabled', subject: id, data: { reason, host: new URL(endpoint.url).host } },
  );
}
