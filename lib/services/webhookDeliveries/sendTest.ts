import type { VerbContext } from '@/lib/services/context';
import { record } from '@/lib/services/record';
import { loadEndpoint } from '@/lib/services/webhookEndpoints/load';
import { presentDelivery } from './present';
import { enqueue, newDelivery, TEST_TYPE } from './rows';

/** A message that tells of nothing, tried once. */
export async function testWebhookEndpoint(
  context: VerbContext,
  { params }: { params: { webhookEndpointId: string } },
) {
  const { tenant, caller, runtime } = context;
  const endpoint = await loadEndpoint(context, params.webhookEndpointId);
  const what = { kind: 'test', eventId: null, eventType: TEST_TYPE, projectId: null } as const;
  const row = newDelivery(runtime, endpoint, what);
  await enqueue(tenant, [row]);
  record(context, caller, {
    type: 'webhookEndpoint.tested',
    subject: endpoint.id,
    data: { deliveryId: row.id },
  });
  return presentDelivery(row, null);
}
