import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { revokeApiKey } from '@/lib/services/apiKeys/revoke';
import * as contracts from '@/openapi/contracts/apiKeys';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.revokeApiKey, revokeApiKey),
});
