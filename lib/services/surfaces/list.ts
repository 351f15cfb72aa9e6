import { and, desc, eq, lt } from 'drizzle-orm';
import { surfaces } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/design';
import { presentSurface } from './present';

type List = typeof contract.listSurfaces;

export async function listSurfaces(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const list = ['surfaces', project.id];
  const after = readCursor(list, query.cursor);
  const rows = await tenant.db
    .select()
    .from(surfaces)
    .where(
      and(
        eq(surfaces.organizationId, caller.organizationId),
        eq(surfaces.projectId, project.id),
        after === null ? undefined : lt(surfaces.id, after),
      ),
    )
    .orderBy(desc(surfaces.id))
    .limit(query.limit + 1);
  const length = new Lengths(query.length ?? project.lengthUnit);
  return pageOf(
    rows,
    query.limit,
    list,
    (row) => row.id,
    (row) => presentSurface(row, length),
  );
}
