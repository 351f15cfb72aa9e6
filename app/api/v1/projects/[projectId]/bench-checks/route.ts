import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { listBenchChecks } from '@/lib/services/benchChecks/list';
import * as contracts from '@/openapi/contracts/grade';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listBenchChecks, listBenchChecks),
});
