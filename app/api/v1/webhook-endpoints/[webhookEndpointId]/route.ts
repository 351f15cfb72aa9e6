import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { deleteWebhookEndpoint } from '@/lib/services/webhookEndpoints/delete';
import { readWebhookEndpoint } from '@/lib/services/webhookEndpoints/read';
import { updateWebhookEndpoint } from '@/lib/services/webhookEndpoints/update';
import * as contracts from '@/openapi/contracts/webhooks';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getWebhookEndpoint, readWebhookEndpoint),
  patch: endpoint(contracts.updateWebhookEndpoint, updateWebhookEndpoint),
  delete: endpoint(contracts.deleteWebhookEndpoint, deleteWebhookEndpoint),
});
