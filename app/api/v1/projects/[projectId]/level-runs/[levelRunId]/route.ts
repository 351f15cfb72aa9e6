import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readLevelRun } from '@/lib/services/levelRuns/read';
import * as contracts from '@/openapi/contracts/levelling';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getLevelRun, readLevelRun),
});
