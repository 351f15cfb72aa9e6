import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { createAdjustment } from '@/lib/services/adjustments/create';
import { listAdjustments } from '@/lib/services/adjustments/list';
import * as contracts from '@/openapi/contracts/adjustments';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listAdjustments, listAdjustments),
  post: endpoint(contracts.createAdjustment, createAdjustment),
});
