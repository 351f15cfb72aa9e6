import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { createLayer } from '@/lib/services/layers/create';
import { listLayers } from '@/lib/services/layers/list';
import * as contracts from '@/openapi/contracts/design';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listLayers, listLayers),
  post: endpoint(contracts.createLayer, createLayer),
});
