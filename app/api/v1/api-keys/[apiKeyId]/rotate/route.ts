import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { rotateApiKey } from '@/lib/services/apiKeys/rotate';
import * as contracts from '@/openapi/contracts/apiKeys';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.rotateApiKey, rotateApiKey),
});
