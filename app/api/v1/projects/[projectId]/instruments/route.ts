import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { createInstrument } from '@/lib/services/instruments/create';
import { listInstruments } from '@/lib/services/instruments/list';
import * as contracts from '@/openapi/contracts/instruments';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listInstruments, listInstruments),
  post: endpoint(contracts.createInstrument, createInstrument),
});
