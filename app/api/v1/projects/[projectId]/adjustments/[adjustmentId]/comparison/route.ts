import { computedEndpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { compareAdjustments } from '@/lib/services/adjustments/compare';
import * as contracts from '@/openapi/contracts/adjustments';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: computedEndpoint(contracts.compareAdjustments, compareAdjustments),
});
