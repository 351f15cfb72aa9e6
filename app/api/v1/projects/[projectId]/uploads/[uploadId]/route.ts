import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readUpload } from '@/lib/services/uploads/read';
import * as contracts from '@/openapi/contracts/uploads';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getUpload, readUpload),
});
