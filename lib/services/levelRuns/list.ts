import { and, desc, eq, lt } from 'drizzle-orm';
import { levelRuns } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/levelling';
import { type LevelRunRow, touches } from './load';
import { presentLevelRun } from './present';

type List = typeof contract.listLevelRuns;

export async function listLevelRuns(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const { verdict, instrument, point } = query;
  const list = ['level-runs', project.id, verdict, instrument, point];
  const after = readCursor(list, query.cursor);
  const rows = await tenant.db
    .select()
    .from(levelRuns)
    .where(
      and(
        eq(levelRuns.organizationId, organizationId),
        eq(levelRuns.projectId, project.id),
        verdict ? eq(levelRuns.verdict, verdict) : undefined,
        instrument ? eq(levelRuns.instrumentName, instrument) : undefined,
        point ? touches(tenant, organizationId, [point]) : undefined,
        after === null ? undefined : lt(levelRuns.id, after),
      ),
    )
    .orderBy(desc(levelRuns.id))
    .limit(query.limit + 1);
  const length = new Lengths(query.length ?? project.lengthUnit);
  return pageOf(
    rows as LevelRunRow[],
    query.limit,
    list,
    (row) => row.id,
    (row) => presentLevelRun(row, length),
  );
}
