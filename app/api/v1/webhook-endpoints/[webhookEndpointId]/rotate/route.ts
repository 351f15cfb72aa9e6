import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { rotateWebhookSecret } from '@/lib/services/webhookEndpoints/rotate';
import * as contracts from '@/openapi/contracts/webhooks';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.rotateWebhookSecret, rotateWebhookSecret),
});
