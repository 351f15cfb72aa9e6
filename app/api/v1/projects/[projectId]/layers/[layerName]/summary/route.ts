import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readLayerSummary } from '@/lib/services/layers/summary';
import * as contracts from '@/openapi/contracts/design';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getLayerSummary, readLayerSummary),
});
