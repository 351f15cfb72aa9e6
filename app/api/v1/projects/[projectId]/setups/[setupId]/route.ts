import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readSetup } from '@/lib/services/setups/read';
import * as contracts from '@/openapi/contracts/setups';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getSetup, readSetup),
});
