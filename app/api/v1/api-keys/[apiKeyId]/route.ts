import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readApiKey } from '@/lib/services/apiKeys/read';
import * as contracts from '@/openapi/contracts/apiKeys';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getApiKey, readApiKey),
});
