import { publicEndpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readHub } from '@/lib/services/organizations/create';
import * as contracts from '@/openapi/contracts/hub';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: publicEndpoint(contracts.getHub, readHub),
});
