import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { refitSetup } from '@/lib/services/setups/refit';
import * as contracts from '@/openapi/contracts/setups';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.refitSetup, refitSetup),
});
