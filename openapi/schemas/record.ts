import * as z from 'zod';
import { Id, Moment, page } from './primitives';

const Details = z.record(z.string(), z.unknown()).meta({ type: 'object', additionalProperties: true });

export const Event = z
  .object({
    id: Id,
    type: z.string().meta({ example: 'setup.computed' }),
    subject: z.string().meta({ description: 'Id or name of what it is about.' }),
    projectId: Id.nullable(),
    occurredAt: Moment,
    data: Details,
  })
  .meta({ id: 'Event' });

export const EventPage = z
  .object({
    data: z.array(Event),
    nextCursor: z
      .string()
      .meta({ description: 'Send as ?after= for what comes later; valid at the end too.' }),
  })
  .meta({ id: 'EventPage', description: 'In commit order.' });

export const AuditEntry = z
  .object({
    id: Id,
    action: z.string().meta({ example: 'setup.released' }),
    subject: z.string(),
    projectId: Id.nullable(),
    actor: z.object({
      kind: z.enum(['person', 'key', 'job']),
      id: Id.nullable(),
      name: z.string(),
    }),
    requestId: z.string().nullable(),
    occurredAt: Moment,
    details: Details,
  })
  .meta({ id: 'AuditEntry' });

export const AuditEntryPage = page('AuditEntryPage', AuditEntry);
