import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readPegTest } from '@/lib/services/pegTests/read';
import * as contracts from '@/openapi/contracts/levelling';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getPegTest, readPegTest),
});
