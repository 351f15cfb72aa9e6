import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { cancelJob } from '@/lib/services/jobs/cancel';
import * as contracts from '@/openapi/contracts/jobs';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.cancelJob, cancelJob),
});
