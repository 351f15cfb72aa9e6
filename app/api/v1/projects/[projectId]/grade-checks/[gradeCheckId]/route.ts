import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { readGradeCheck } from '@/lib/services/gradeChecks/read';
import * as contracts from '@/openapi/contracts/grade';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.getGradeCheck, readGradeCheck),
});
