import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { createProject } from '@/lib/services/projects/create';
import { listProjects } from '@/lib/services/projects/list';
import * as contracts from '@/openapi/contracts/projects';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listProjects, listProjects),
  post: endpoint(contracts.createProject, createProject),
});
