import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readProject } from '@/lib/services/projects/read';
import { updateProject } from '@/lib/services/projects/update';
import * as contracts from '@/openapi/contracts/projects';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getProject, readProject),
  patch: endpoint(contracts.updateProject, updateProject),
});
