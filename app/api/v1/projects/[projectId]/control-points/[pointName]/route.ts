import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readControlPoint } from '@/lib/services/control/read';
import { updateControlPoint } from '@/lib/services/control/update';
import * as contracts from '@/openapi/contracts/control';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getControlPoint, readControlPoint),
  patch: endpoint(contracts.updateControlPoint, updateControlPoint),
});
