import * as z from 'zod';
import { contract } from '@/openapi/contract';
import { WebhookDeliveryParams, WebhookEndpointParams } from '@/openapi/params';
import { PageQuery } from '@/openapi/schemas/primitives';
import {
  WebhookDelivery,
  WebhookDeliveryDetail,
  WebhookDeliveryPage,
  WebhookEndpoint,
  WebhookEndpointCreate,
  WebhookEndpointPage,
  WebhookEndpointPatch,
  WebhookEndpointSecret,
  WebhookReplay,
  WebhookReplayRequest,
  WebhookSecretRotate,
} from '@/openapi/schemas/webhook';

export const listWebhookEndpoints = contract({
  id: 'listWebhookEndpoints',
  method: 'get',
  path: '/webhook-endpoints',
  tag: 'Webhooks',
  summary: 'List webhook endpoints',
  description: 'Addresses that are told what happens, newest first, with how they stand.',
  access: 'webhooks:read',
  organizationWide: true,
  query: PageQuery,
  answers: { 200: { description: 'A page of endpoints.', json: WebhookEndpointPage } },
  problems: ['cursor_invalid'],
});

export const createWebhookEndpoint = contract({
  id: 'createWebhookEndpoint',
  method: 'post',
  path: '/webhook-endpoints',
  tag: 'Webhooks',
  summary: 'Make a webhook endpoint',
  description:
    'Events from now on are posted to the address, each signed after the Standard Webhooks specification 1.0.0 with a secret that is shown once. A message may come twice and out of order: its webhook-id tells. It counts as delivered at an answer 2xx within 20 seconds; else it is tried again after 5 s, 5 min, 30 min, 2, 5, 10, 14, 20 and 24 hours. An answer 410 ends the endpoint, and so does a message that is given up with none delivered meanwhile. Redirects are not followed. Whoever makes it needs `events:read`, too.',
  access: 'webhooks:write',
  organizationWide: true,
  body: { json: WebhookEndpointCreate },
  secret: true,
  answers: { 201: { description: 'The endpoint and its secret.', json: WebhookEndpointSecret } },
  problems: ['conflict', 'secret_already_shown'],
});

export const getWebhookEndpoint = contract({
  id: 'getWebhookEndpoint',
  method: 'get',
  path: '/webhook-endpoints/{webhookEndpointId}',
  tag: 'Webhooks',
  summary: 'Read a webhook endpoint',
  description: 'Address, filters, and how it stands in words.',
  access: 'webhooks:read',
  organizationWide: true,
  params: WebhookEndpointParams,
  answers: { 200: { description: 'The endpoint.', json: WebhookEndpoint } },
});

export const updateWebhookEndpoint = contract({
  id: 'updateWebhookEndpoint',
  method: 'patch',
  path: '/webhook-endpoints/{webhookEndpointId}',
  tag: 'Webhooks',
  summary: 'Change a webhook endpoint',
  description:
    'Another address or filter, or off and on again. What happens while it is off is not sent, nor what was still to come when it was switched off: replay the time range once it is on.',
  access: 'webhooks:write',
  organizationWide: true,
  params: WebhookEndpointParams,
  body: { json: WebhookEndpointPatch },
  answers: { 200: { description: 'The endpoint.', json: WebhookEndpoint } },
});

export const deleteWebhookEndpoint = contract({
  id: 'deleteWebhookEndpoint',
  method: 'delete',
  path: '/webhook-endpoints/{webhookEndpointId}',
  tag: 'Webhooks',
  summary: 'Delete a webhook endpoint',
  description: 'It goes with its deliveries; the audit entries stay.',
  access: 'webhooks:write',
  organizationWide: true,
  params: WebhookEndpointParams,
  answers: { 204: { description: 'It is gone.' } },
});

export const rotateWebhookSecret = contract({
  id: 'rotateWebhookSecret',
  method: 'post',
  path: '/webhook-endpoints/{webhookEndpointId}/rotate',
  tag: 'Webhooks',
  summary: 'Rotate a webhook secret',
  description:
    'A new secret, shown once. For the overlap messages carry both signatures, so that the receiver can change over at any moment; of two overlaps the later one counts.',
  access: 'webhooks:write',
  organizationWide: true,
  params: WebhookEndpointParams,
  body: { json: WebhookSecretRotate },
  secret: true,
  answers: { 201: { description: 'The endpoint and its new secret.', json: WebhookEndpointSecret } },
  problems: ['secret_already_shown'],
});

export const testWebhookEndpoint = contract({
  id: 'testWebhookEndpoint',
  method: 'post',
  path: '/webhook-endpoints/{webhookEndpointId}/test',
  tag: 'Webhooks',
  summary: 'Send a test message',
  description:
    'A message of type `webhook.test`, tried once, also to an endpoint that is off. Read the delivery for its answer.',
  access: 'webhooks:write',
  organizationWide: true,
  params: WebhookEndpointParams,
  answers: { 202: { description: 'The delivery that will tell.', json: WebhookDelivery } },
});

export const listWebhookDeliveries = contract({
  id: 'listWebhookDeliveries',
  method: 'get',
  path: '/webhook-endpoints/{webhookEndpointId}/deliveries',
  tag: 'Webhooks',
  summary: 'List deliveries',
  description: 'Newest first, each with its last attempt and answer. They are kept for 30 days.',
  access: 'webhooks:read',
  organizationWide: true,
  params: WebhookEndpointParams,
  query: z.strictObject({
    ...PageQuery.shape,
    status: z.enum(['pending', 'delivered', 'failed']).optional(),
    type: z.string().max(80).optional().meta({ description: 'Only events of this type.' }),
  }),
  answers: { 200: { description: 'A page of deliveries.', json: WebhookDeliveryPage } },
  problems: ['cursor_invalid'],
});

export const getWebhookDelivery = contract({
  id: 'getWebhookDelivery',
  method: 'get',
  path: '/webhook-endpoints/{webhookEndpointId}/deliveries/{deliveryId}',
  tag: 'Webhooks',
  summary: 'Read a delivery',
  description: 'The message, and every attempt with its request and answer.',
  access: 'webhooks:read',
  organizationWide: true,
  params: WebhookDeliveryParams,
  answers: { 200: { description: 'The delivery.', json: WebhookDeliveryDetail } },
});

export const replayWebhookDelivery = contract({
  id: 'replayWebhookDelivery',
  method: 'post',
  path: '/webhook-endpoints/{webhookEndpointId}/deliveries/{deliveryId}/replay',
  tag: 'Webhooks',
  summary: 'Send a message again',
  description: 'The same message under the same webhook-id, as a delivery of its own.',
  access: 'webhooks:write',
  organizationWide: true,
  params: WebhookDeliveryParams,
  answers: { 202: { description: 'The new delivery.', json: WebhookDelivery } },
  problems: ['conflict'],
});

export const replayWebhookEvents = contract({
  id: 'replayWebhookEvents',
  method: 'post',
  path: '/webhook-endpoints/{webhookEndpointId}/replays',
  tag: 'Webhooks',
  summary: 'Send a time range again',
  description:
    'All events of the range that pass the endpoint’s filters, whether they were sent before or not, each under its own webhook-id; 10,000 at most.',
  access: 'webhooks:write',
  organizationWide: true,
  params: WebhookEndpointParams,
  body: { json: WebhookReplayRequest },
  answers: { 202: { description: 'How many will be sent.', json: WebhookReplay } },
  problems: ['conflict'],
});
