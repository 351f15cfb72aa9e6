import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { releaseSetup } from '@/lib/services/setups/release';
import * as contracts from '@/openapi/contracts/setups';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.releaseSetup, releaseSetup),
});
