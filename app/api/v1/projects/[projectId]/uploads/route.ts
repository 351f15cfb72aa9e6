import { endpoint, rawEndpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { createUpload } from '@/lib/services/uploads/create';
import { listUploads } from '@/lib/services/uploads/list';
import * as contracts from '@/openapi/contracts/uploads';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listUploads, listUploads),
  post: rawEndpoint(contracts.createUpload, createUpload),
});
