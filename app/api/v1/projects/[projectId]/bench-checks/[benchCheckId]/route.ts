import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readBenchCheck } from '@/lib/services/benchChecks/read';
import * as contracts from '@/openapi/contracts/grade';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getBenchCheck, readBenchCheck),
});
