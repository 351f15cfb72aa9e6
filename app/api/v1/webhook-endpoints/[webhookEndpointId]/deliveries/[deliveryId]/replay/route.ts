import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { replayWebhookDelivery } from '@/lib/services/webhookDeliveries/replay';
import * as contracts from '@/openapi/contracts/webhooks';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.replayWebhookDelivery, replayWebhookDelivery),
});
