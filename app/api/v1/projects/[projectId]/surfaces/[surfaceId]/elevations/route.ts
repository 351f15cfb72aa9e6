import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { querySurfaceElevations } from '@/lib/services/surfaces/elevations';
import * as contracts from '@/openapi/contracts/design';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.querySurfaceElevations, querySurfaceElevations),
});
