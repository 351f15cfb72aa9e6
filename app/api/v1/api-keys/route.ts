import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { createApiKey } from '@/lib/services/apiKeys/create';
import { listApiKeys } from '@/lib/services/apiKeys/list';
import * as contracts from '@/openapi/contracts/apiKeys';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listApiKeys, listApiKeys),
  post: endpoint(contracts.createApiKey, createApiKey),
});
