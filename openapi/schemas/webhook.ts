import * as z from 'zod';
import { Id, Instant, Moment, Note, page } from './primitives';
import { Event } from './record';

/** Longest address of an endpoint. */
const LONGEST_URL = 2000;

const Url = z
  .string()
  .max(LONGEST_URL)
  .refine((text) => URL.canParse(text) && /^https?:\/\//i.test(text), {
    error: 'It is no address that begins with https://.',
    params: { code: 'webhook_url_refused' },
  })
  .meta({
    type: 'string',
    format: 'uri',
    description: 'https, without user name or fragment; it must lead to a public address.',
    example: 'https://office.example/hooks/hubtack',
  });

const EventTypes = z
  .array(
    z.string().regex(/^[a-z][A-Za-z]{0,40}\.(?:\*|[a-z][A-Za-z]{0,40})$/, {
      error: 'Types are written setup.released; setup.* stands for all about setups.',
    }),
  )
  .min(1)
  .max(50)
  .nullable()
  .meta({
    description: 'Only these; `setup.*` stands for all about setups. Null = all.',
    example: ['setup.released', 'grade.*'],
  });

const ProjectIds = z
  .array(Id)
  .min(1)
  .max(200)
  .nullable()
  .meta({ description: 'Only these projects; null = all, and what belongs to none.' });

const Description = z.string().trim().min(1).max(200).nullable();

const created = {
  url: 'https://office.example/hooks/hubtack',
  description: 'Office server',
  eventTypes: ['setup.released', 'setup.withdrawn'],
};

export const WebhookEndpointCreate = z
  .strictObject({
    url: Url,
    description: Description.default(null),
    eventTypes: EventTypes.default(null),
    projectIds: ProjectIds.default(null),
    enabled: z.boolean().default(true),
  })
  .meta({ id: 'WebhookEndpointCreate', example: created });

export const WebhookEndpointPatch = z
  .strictObject({
    url: Url.optional(),
    description: Description.optional(),
    eventTypes: EventTypes.optional(),
    projectIds: ProjectIds.optional(),
    enabled: z.boolean().optional(),
  })
  .meta({ id: 'WebhookEndpointPatch', example: { enabled: false } });

export const WebhookEndpoint = z
  .object({
    id: Id,
    url: z.string(),
    description: z.string().nullable(),
    eventTypes: z.array(z.string()).nullable(),
    projectIds: z.array(Id).nullable(),
    enabled: z.boolean(),
    status: z.enum(['active', 'failing', 'disabled']),
    reason: Note.nullable().meta({ description: 'Why it is failing or disabled, and what to do.' }),
    failingSince: Moment.nullable(),
    disabledAt: Moment.nullable(),
    lastDeliveredAt: Moment.nullable(),
    secret: z.object({
      madeAt: Moment,
      previousEndsAt: Moment.nullable().meta({
        description: 'Until then messages are signed with the secret before it, too.',
      }),
    }),
    createdAt: Moment,
    updatedAt: Moment,
  })
  .meta({ id: 'WebhookEndpoint' });

export const WebhookEndpointPage = page('WebhookEndpointPage', WebhookEndpoint);

export const WebhookEndpointSecret = z
  .object({
    endpoint: WebhookEndpoint,
    secret: z.string().meta({ description: 'Shown once.', example: 'whsec_…' }),
  })
  .meta({ id: 'WebhookEndpointSecret' });

export const WebhookSecretRotate = z
  .strictObject({
    overlapMinutes: z
      .int()
      .min(0)
      .max(43_200)
      .meta({ description: 'How long messages are signed with the old secret, too; 0 = not at all.' }),
  })
  .meta({ id: 'WebhookSecretRotate', example: { overlapMinutes: 1440 } });

export const WebhookMessage = z
  .object({
    type: z.string().meta({ example: 'setup.released' }),
    timestamp: Moment.meta({ description: 'When it happened.' }),
    data: Event.meta({ description: 'The event as GET /events shows it.' }),
  })
  .meta({
    id: 'WebhookMessage',
    description: 'What is posted to an endpoint, after the Standard Webhooks specification 1.0.0.',
  });

const Headers = z.record(z.string(), z.string()).meta({ type: 'object', additionalProperties: true });

export const WebhookAttempt = z
  .object({
    number: z.int(),
    startedAt: Moment,
    milliseconds: z.int(),
    request: z.object({
      url: z.string(),
      address: z
        .string()
        .nullable()
        .meta({ description: 'The address that was checked and connected to.', example: '198.51.100.7' }),
      headers: Headers.meta({ description: 'Without the signature.' }),
    }),
    answer: z
      .object({
        status: z.int(),
        headers: Headers,
        body: z.string().meta({ description: 'Its first 4,096 bytes.' }),
        truncated: z.boolean(),
      })
      .nullable(),
    failure: Note.nullable().meta({ description: 'Why it does not count as delivered.' }),
  })
  .meta({ id: 'WebhookAttempt' });

const delivery = {
  id: Id,
  messageId: Id.meta({ description: 'Header webhook-id: the same in every attempt and replay.' }),
  kind: z.enum(['event', 'replay', 'test']),
  eventType: z.string(),
  projectId: Id.nullable(),
  status: z.enum(['pending', 'delivered', 'failed']),
  reason: Note.nullable().meta({ description: 'Why it was given up.' }),
  attempts: z.int(),
  nextAttemptAt: Moment.nullable(),
  createdAt: Moment,
  endedAt: Moment.nullable(),
};

export const WebhookDelivery = z
  .object({
    ...delivery,
    lastAttempt: z.union([WebhookAttempt, z.null()]).meta({ description: 'Null before the first.' }),
  })
  .meta({ id: 'WebhookDelivery' });

export const WebhookDeliveryPage = page('WebhookDeliveryPage', WebhookDelivery);

export const WebhookDeliveryDetail = z
  .object({
    ...delivery,
    message: WebhookMessage,
    history: z.array(WebhookAttempt).meta({ description: 'Every attempt, the first one first.' }),
  })
  .meta({ id: 'WebhookDeliveryDetail' });

export const WebhookReplayRequest = z
  .strictObject({
    since: Instant,
    until: Instant.optional().meta({ description: 'Now without it.' }),
  })
  .meta({ id: 'WebhookReplayRequest', example: { since: '2031-04-12T07:00:00-06:00' } });

export const WebhookReplay = z
  .object({
    count: z.int().meta({ description: 'How many messages are sent again.' }),
    since: Moment,
    until: Moment,
  })
  .meta({ id: 'WebhookReplay' });
