import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/design';
import { Name } from '@/openapi/schemas/primitives';
import { layersAfter } from './load';
import { presentLayer } from './present';

type List = typeof contract.listLayers;

export async function listLayers(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const list = ['layers', project.id];
  const rows = await layersAfter(tenant, project, readCursor(list, query.cursor, Name), query.limit + 1);
  const length = new Lengths(query.length ?? project.lengthUnit);
  return pageOf(
    rows,
    query.limit,
    list,
    (row) => row.name,
    (row) => presentLayer(row, length),
  );
}
