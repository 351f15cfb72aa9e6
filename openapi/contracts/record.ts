import * as z from 'zod';
import { contract } from '@/openapi/contract';
import { Id, PageQuery } from '@/openapi/schemas/primitives';
import { AuditEntryPage, EventPage } from '@/openapi/schemas/record';

export const listEvents = contract({
  id: 'listEvents',
  method: 'get',
  path: '/events',
  tag: 'Record',
  summary: 'Follow what happens',
  description:
    'Events in commit order after a cursor: nothing is skipped, nothing comes twice. Keep the cursor and ask again.',
  access: 'events:read',
  query: z.strictObject({
    limit: PageQuery.shape.limit,
    after: z
      .string()
      .max(500)
      .optional()
      .meta({ description: 'nextCursor of the last page; from the beginning without it.' }),
    type: z
      .string()
      .max(80)
      .optional()
      .meta({ description: 'Only events of this type.', example: 'setup.computed' }),
    projectId: Id.optional(),
  }),
  answers: { 200: { description: 'Events after the cursor.', json: EventPage } },
  problems: ['cursor_invalid'],
});

export const streamEvents = contract({
  id: 'streamEvents',
  method: 'get',
  path: '/events/stream',
  tag: 'Record',
  summary: 'Be told what happens',
  description:
    'The same events in the same order as server-sent events, as they are committed: `data` holds the event, `id` the cursor behind it. Whoever comes back with the last id in Last-Event-ID (browsers do so by themselves) misses none and gets none twice; the cursor serves GET /events, too. A comment passes every 15 seconds where nothing happens. It ends with an event `problem` when the key is revoked. Five streams a key or person at once.',
  access: 'events:read',
  query: z.strictObject({
    after: z.string().max(500).optional().meta({
      description: 'A cursor, or `latest` for what happens from now on; from the beginning without it.',
      example: 'latest',
    }),
    type: listEvents.query.shape.type,
    projectId: Id.optional(),
  }),
  headers: z.object({
    'Last-Event-ID': z
      .string()
      .max(500)
      .optional()
      .meta({ description: 'The id of the last event that arrived; it comes before ?after=.' }),
  }),
  answers: { 200: { description: 'Events, as long as you listen.', media: 'text/event-stream' } },
  problems: ['cursor_invalid', 'too_many_streams'],
});

export const listAuditEntries = contract({
  id: 'listAuditEntries',
  method: 'get',
  path: '/audit-entries',
  tag: 'Record',
  summary: 'Who did what',
  description: 'Every change with its actor and request, newest first. Entries are never changed or removed.',
  access: 'audit:read',
  query: z.strictObject({
    ...PageQuery.shape,
    projectId: Id.optional(),
    action: z
      .string()
      .max(80)
      .optional()
      .meta({ description: 'Only this act, by its full name.', example: 'setup.released' }),
  }),
  answers: { 200: { description: 'A page of audit entries.', json: AuditEntryPage } },
  problems: ['cursor_invalid'],
});
