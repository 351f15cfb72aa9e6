import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { listWebhookDeliveries } from '@/lib/services/webhookDeliveries/list';
import * as contracts from '@/openapi/contracts/webhooks';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listWebhookDeliveries, listWebhookDeliveries),
});
