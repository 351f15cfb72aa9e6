import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { listGradeChecks } from '@/lib/services/gradeChecks/list';
import * as contracts from '@/openapi/contracts/grade';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listGradeChecks, listGradeChecks),
});
