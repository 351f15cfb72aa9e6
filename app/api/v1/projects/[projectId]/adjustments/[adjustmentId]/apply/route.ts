import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { applyAdjustment } from '@/lib/services/adjustments/apply';
import * as contracts from '@/openapi/contracts/adjustments';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  post: endpoint(contracts.applyAdjustment, applyAdjustment),
});
