import { and, asc, eq } from 'drizzle-orm';
import { webhookAttempts } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { type DeliveryParams, loadDelivery } from './load';
import { readMessage } from './message';
import { presentAttempt, presentCommon } from './present';

/** A message with every attempt to get it through. */
export async function readWebhookDelivery(context: VerbContext, { params }: { params: DeliveryParams }) {
  const { tenant, caller } = context;
  const { row } = await loadDelivery(context, params);
  const attempts = await tenant.db
    .select()
    .from(webhookAttempts)
    .where(
      and(eq(webhookAttempts.organizationId, caller.organizationId), eq(webhookAttempts.deliveryId, row.id)),
    )
    .orderBy(asc(webhookAttempts.number));
  return {
    ...presentCommon(row),
    message: await readMessage(tenant, row),
    history: attempts.map(presentAttempt),
  };
}
