import { and, eq } from 'drizzle-orm';
import { events } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { messageOf } from '@/lib/notify/message';
import { type EventRow, presentEvent } from '@/lib/services/events/present';
import { asMoment } from '@/lib/services/moments';
import { type DeliveryRow, TEST_TYPE } from './rows';

/** What a delivery tells: its event, or that it is a test. */
export async function readMessage(tenant: Tenant, delivery: DeliveryRow) {
  const { organizationId, eventId } = delivery;
  if (eventId === null) return testMessage(delivery);
  const [event] = await tenant.db
    .select()
    .from(events)
    .where(and(eq(events.organizationId, organizationId), eq(events.id, eventId)));
  return messageOf(presentEvent(event as EventRow));
}

function testMessage({ id, endpointId, createdAt }: DeliveryRow) {
  return messageOf({
    id,
    type: TEST_TYPE,
    subject: endpointId,
    projectId: null,
    occurredAt: asMoment(createdAt),
    data: { note: 'A test. Nothing happened.' },
  });
}
