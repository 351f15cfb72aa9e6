import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readInstrument } from '@/lib/services/instruments/read';
import * as contracts from '@/openapi/contracts/instruments';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getInstrument, readInstrument),
});
