import { bodyEndpoint, endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { createControlPoints } from '@/lib/services/control/create';
import { entriesOf } from '@/lib/services/control/entries';
import { listControlPoints } from '@/lib/services/control/list';
import * as contracts from '@/openapi/contracts/control';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listControlPoints, listControlPoints),
  post: bodyEndpoint(contracts.createControlPoints, (context, { params, query }, body) =>
    createControlPoints(context, params.projectId, entriesOf(body, query), query.revise === 'true'),
  ),
});
