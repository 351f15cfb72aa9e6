import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { presentCaller } from '@/lib/services/sessions/open';
import * as contracts from '@/openapi/contracts/hub';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.whoami, ({ tenant, caller }) => presentCaller(tenant, caller)),
});
