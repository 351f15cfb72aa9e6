import { and, desc, eq, lt } from 'drizzle-orm';
import { adjustmentResults, adjustments, jobs } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/adjustments';
import { presentSummary } from './present';

type List = typeof contract.listAdjustments;

export async function listAdjustments(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const list = ['adjustments', project.id];
  const after = readCursor(list, query.cursor);
  const rows = await tenant.db
    .select({ adjustment: adjustments, status: jobs.status, verdict: adjustmentResults.verdict })
    .from(adjustments)
    .innerJoin(jobs, and(eq(jobs.organizationId, adjustments.organizationId), eq(jobs.id, adjustments.jobId)))
    .leftJoin(
      adjustmentResults,
      and(
        eq(adjustmentResults.organizationId, adjustments.organizationId),
        eq(adjustmentResults.adjustmentId, adjustments.id),
      ),
    )
    .where(
      and(
        eq(adjustments.organizationId, organizationId),
        eq(adjustments.projectId, project.id),
        after === null ? undefined : lt(adjustments.id, after),
      ),
    )
    .orderBy(desc(adjustments.id))
    .limit(query.limit + 1);
  return pageOf(
    rows,
    query.limit,
    list,
    ({ adjustment }) => adjustment.id,
    ({ adjustment, status, verdict }) => presentSummary(adjustment, status, verdict),
  );
}
