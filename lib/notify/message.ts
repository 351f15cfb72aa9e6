import type * as z from 'zod';
import type { WebhookMessage } from '@/openapi/schemas/webhook';

type Message = z.output<typeof WebhookMessage>;

/** The specification asks for less than 20 kB. */
const MAX_BYTES = 20_000;

/** Message of an event. */
export function messageOf(event: Message['data']): Message {
  return { type: event.type, timestamp: event.occurredAt, data: event };
}

/** What is signed and sent; an event that is too large is told without its details, which GET /events has. */
export function bodyOf(message: Message): string {
  const body = JSON.stringify(message);
  if (Buffer.byteLength(body) < MAX_BYTES) return body;
  return JSON.stringify({ ...message, data: { ...message.data, data: { omitted: true } } });
}
