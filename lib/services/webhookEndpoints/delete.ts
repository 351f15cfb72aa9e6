import { eq } from 'drizzle-orm';
import { directory, webhookEndpoints } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { record } from '@/lib/services/record';
import { webhookHandle } from './create';
import { loadEndpoint, sameEndpoint } from './load';

/** Removes an endpoint with its deliveries. */
export async function deleteWebhookEndpoint(
  context: VerbContext,
  { params }: { params: { webhookEndpointId: string } },
): Promise<undefined> {
  const { tenant, caller } = context;
  const { id, url } = await loadEndpoint(context, params.webhookEndpointId, true);
  await tenant.db.delete(webhookEndpoints).where(sameEndpoint(caller.organizationId, id));
  await tenant.db.delete(directory).where(eq(directory.handleSha256, webhookHandle(id)));
  record(context, caller, {
    type: 'webhookEndpoint.deleted',
    subject: id,
    data: { host: new URL(url).host },
  });
}
