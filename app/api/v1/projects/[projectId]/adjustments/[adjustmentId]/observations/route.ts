import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { listAdjustmentObservations } from '@/lib/services/adjustments/observations';
import * as contracts from '@/openapi/contracts/adjustments';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listAdjustmentObservations, listAdjustmentObservations),
});
