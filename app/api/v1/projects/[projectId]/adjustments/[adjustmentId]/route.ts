import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readAdjustment } from '@/lib/services/adjustments/read';
import * as contracts from '@/openapi/contracts/adjustments';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getAdjustment, readAdjustment),
});
