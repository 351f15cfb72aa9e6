import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readControlAffected } from '@/lib/services/affected/ofControl';
import * as contracts from '@/openapi/contracts/control';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getControlPointAffected, readControlAffected),
});
