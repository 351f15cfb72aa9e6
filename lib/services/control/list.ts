import { and, asc, eq, gt } from 'drizzle-orm';
import { controlPoints } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/control';
import { Name } from '@/openapi/schemas/primitives';
import { currentControl } from './load';
import { presentControlPoint } from './present';

type List = typeof contract.listControlPoints;

/** The registry by name. */
export async function listControlPoints(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const list = ['control', project.id, query.status];
  const after = readCursor(list, query.cursor, Name);
  const further = and(
    after === null ? undefined : gt(controlPoints.name, after),
    query.status ? eq(controlPoints.status, query.status) : undefined,
  );
  const rows = await currentControl(tenant, caller.organizationId, project.id, further)
    .orderBy(asc(controlPoints.name))
    .limit(query.limit + 1);
  const unit = query.length ?? project.lengthUnit;
  return pageOf(
    rows,
    query.limit,
    list,
    (row) => row.point.name,
    (row) => presentControlPoint(row, unit),
  );
}
