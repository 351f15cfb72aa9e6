import type { VerbContext } from '@/lib/services/context';
import { loadEndpoint } from './load';
import { presentEndpoint } from './present';

export async function readWebhookEndpoint(
  context: VerbContext,
  { params }: { params: { webhookEndpointId: string } },
) {
  return presentEndpoint(await loadEndpoint(context, params.webhookEndpointId), context.runtime.now());
}
