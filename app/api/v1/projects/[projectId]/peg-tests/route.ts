import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { listPegTests } from '@/lib/services/pegTests/list';
import * as contracts from '@/openapi/contracts/levelling';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listPegTests, listPegTests),
});
