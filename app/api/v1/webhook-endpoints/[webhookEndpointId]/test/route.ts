import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { testWebhookEndpoint } from '@/lib/services/webhookDeliveries/sendTest';
import * as contracts from '@/openapi/contracts/webhooks';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.testWebhookEndpoint, testWebhookEndpoint),
});
