import { and, desc, eq, lt } from 'drizzle-orm';
import { gradeChecks } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { layerFacts } from '@/lib/services/layers/facts';
import { Lengths } from '@/lib/services/lengths';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadProject } from '@/lib/services/projects/load';
import { voidOf } from '@/lib/services/setups/standing';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/grade';
import { presentGradeCheck } from './present';

type List = typeof contract.listGradeChecks;

export async function listGradeChecks(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const list = ['grade-checks', project.id, query.layer, query.verdict];
  const after = readCursor(list, query.cursor);
  const rows = await tenant.db
    .select()
    .from(gradeChecks)
    .where(
      and(
        eq(gradeChecks.organizationId, caller.organizationId),
        eq(gradeChecks.projectId, project.id),
        query.layer ? eq(gradeChecks.layerName, query.layer) : undefined,
        query.verdict ? eq(gradeChecks.verdict, query.verdict) : undefined,
        after === null ? undefined : lt(gradeChecks.id, after),
      ),
    )
    .orderBy(desc(gradeChecks.id))
    .limit(query.limit + 1);
  const layerOf = await layerFacts(tenant, project, rows);
  const voided = await voidOf(tenant, caller.organizationId, rows);
  const length = new Lengths(query.length ?? project.lengthUnit);
  const present = (row: (typeof rows)[number]) =>
    presentGradeCheck(row, layerOf(row), length, project.displayDecimals, voided(row));
  return pageOf(rows, query.limit, list, (row) => row.id, present);
}
