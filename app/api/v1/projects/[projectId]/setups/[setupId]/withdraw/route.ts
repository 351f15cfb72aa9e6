import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { withdrawSetup } from '@/lib/services/setups/withdraw';
import * as contracts from '@/openapi/contracts/setups';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.withdrawSetup, withdrawSetup),
});
