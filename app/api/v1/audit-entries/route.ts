import { endpoint } from '@/lib/http/endpoint';
import { route } from '@/lib/http/route';
import { listAuditEntries } from '@/lib/services/auditEntries/list';
import * as contracts from '@/openapi/contracts/record';

export const { GET, HEAD, POST, PUT, PATCH, DELETE, OPTIONS } = route({
  get: endpoint(contracts.listAuditEntries, listAuditEntries),
});
