import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { createSurface } from '@/lib/services/surfaces/create';
import { listSurfaces } from '@/lib/services/surfaces/list';
import * as contracts from '@/openapi/contracts/design';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listSurfaces, listSurfaces),
  post: endpoint(contracts.createSurface, createSurface),
});
