import type { InferSelectModel } from 'drizzle-orm';
import { type webhookAttempts, webhookDeliveries } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { Runtime } from '@/lib/runtime';

export type DeliveryRow = InferSelectModel<typeof webhookDeliveries>;
export type AttemptRow = InferSelectModel<typeof webhookAttempts>;

/** Type of the message that a test sends. */
export const TEST_TYPE = 'webhook.test';

type What = Pick<DeliveryRow, 'kind' | 'eventId' | 'eventType' | 'projectId'>;

/** A delivery that is due at once. */
export function newDelivery(
  runtime: Runtime,
  endpoint: { organizationId: string; id: string },
  { kind, eventId, eventType, projectId }: What,
): DeliveryRow {
  const at = runtime.now().toISOString();
  return {
    organizationId: endpoint.organizationId,
    id: runtime.uuid(),
    endpointId: endpoint.id,
    kind,
    eventId,
    eventType,
    projectId,
    status: 'pending',
    reason: null,
    attempts: 0,
    nextAttemptAt: at,
    createdAt: at,
    endedAt: null,
  };
}

/** Rows a statement; each takes a parameter for every column. */
const CHUNK = 1000;

/** Puts deliveries into the queue; an event that was told to the endpoint already is passed over. */
export async function enqueue(tenant: Tenant, rows: readonly DeliveryRow[]): Promise<void> {
  for (let i = 0; i < rows.length; i += CHUNK)
    await tenant.db
      .insert(webhookDeliveries)
      .values(rows.slice(i, i + CHUNK))
      .onConflictDoNothing();
}
