import { and, desc, eq, inArray, lt } from 'drizzle-orm';
import { auditEntries } from '@/db/schema';
import { mayUseProject } from '@/lib/access/actor';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { asMoment } from '@/lib/services/moments';
import { pageOf, readCursor } from '@/lib/services/paging';
import type { QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/record';

type List = typeof contract.listAuditEntries;

/** Every change with its actor and request, newest first. */
export async function listAuditEntries({ tenant, caller }: VerbContext, { query }: { query: QueryOf<List> }) {
  if (query.projectId !== undefined && !mayUseProject(caller, query.projectId))
    throw new Problem('not_found');
  const list = ['audit', query.projectId, query.action];
  const after = readCursor(list, query.cursor);
  const rows = await tenant.db
    .select()
    .from(auditEntries)
    .where(
      and(
        eq(auditEntries.organizationId, caller.organizationId),
        query.projectId ? eq(auditEntries.projectId, query.projectId) : undefined,
        query.action ? eq(auditEntries.action, query.action) : undefined,
        caller.projectIds === null ? undefined : inArray(auditEntries.projectId, [...caller.projectIds]),
        after === null ? undefined : lt(auditEntries.id, after),
      ),
    )
    .orderBy(desc(auditEntries.id))
    .limit(query.limit + 1);
  return pageOf(
    rows,
    query.limit,
    list,
    (row) => row.id,
    (row) => ({
      id: row.id,
      action: row.action,
      subject: row.subject,
      projectId: row.projectId,
      actor: { kind: row.actorKind, id: row.actorId, name: row.actorName },
      requestId: row.requestId,
      occurredAt: asMoment(row.occurredAt),
      details: row.details as Record<string, unknown>,
    }),
  );
}
