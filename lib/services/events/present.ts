import type { InferSelectModel } from 'drizzle-orm';
import type * as z from 'zod';
import type { events } from '@/db/schema';
import { asMoment } from '@/lib/services/moments';
import type { Event } from '@/openapi/schemas/record';

export type EventRow = InferSelectModel<typeof events>;

export function presentEvent(row: EventRow): z.output<typeof Event> {
  return {
    id: row.id,
    type: row.type,
    subject: row.subject,
    projectId: row.projectId,
    occurredAt: asMoment(row.occurredAt),
    data: row.data as Record<string, unknown>,
  };
}
