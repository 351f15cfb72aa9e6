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
