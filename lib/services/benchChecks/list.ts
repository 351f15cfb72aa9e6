import { and, desc, eq, lt } from 'drizzle-orm';
import { benchChecks } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadProject } from '@/lib/services/projects/load';
import { voidOf } from '@/lib/services/setups/standing';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/grade';
import { selectBenchChecks } from './load';
import { presentBenchCheck } from './present';

type List = typeof contract.listBenchChecks;

export async function listBenchChecks(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const list = ['bench-checks', project.id, query.machine];
  const after = readCursor(list, query.cursor);
  const wanted = and(
    eq(benchChecks.organizationId, caller.organizationId),
    eq(benchChecks.projectId, project.id),
    query.machine ? eq(benchChecks.machine, query.machine) : undefined,
    after === null ? undefined : lt(benchChecks.id, after),
  );
  const rows = await selectBenchChecks(tenant, wanted)
    .orderBy(desc(benchChecks.id))
    .limit(query.limit + 1);
  const voided = await voidOf(tenant, caller.organizationId, rows);
  const length = new Lengths(query.length ?? project.lengthUnit);
  return pageOf(
    rows,
    query.limit,
    list,
    (row) => row.id,
    (row) => presentBenchCheck(row, length, voided(row)),
  );
}
