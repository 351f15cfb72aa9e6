import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readSurface } from '@/lib/services/surfaces/read';
import * as contracts from '@/openapi/contracts/design';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getSurface, readSurface),
});
