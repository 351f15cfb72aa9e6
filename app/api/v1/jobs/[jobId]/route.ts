import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readJob } from '@/lib/services/jobs/read';
import * as contracts from '@/openapi/contracts/jobs';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getJob, readJob),
});
