import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { createWebhookEndpoint } from '@/lib/services/webhookEndpoints/create';
import { listWebhookEndpoints } from '@/lib/services/webhookEndpoints/list';
import * as contracts from '@/openapi/contracts/webhooks';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listWebhookEndpoints, listWebhookEndpoints),
  post: endpoint(contracts.createWebhookEndpoint, createWebhookEndpoint),
});
