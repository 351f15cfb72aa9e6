import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readCollimation } from '@/lib/services/instruments/collimation';
import * as contracts from '@/openapi/contracts/instruments';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getCollimation, readCollimation),
});
