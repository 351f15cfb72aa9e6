import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { listJobs } from '@/lib/services/jobs/list';
import * as contracts from '@/openapi/contracts/jobs';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listJobs, listJobs),
});
