import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/design';
import { currentLayer } from './load';
import { presentLayer } from './present';

type Read = typeof contract.getLayer;

export async function readLayer(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const row = await currentLayer(tenant, project, params.layerName);
  if (!row) throw new Problem('not_found', `There is no layer ${params.layerName} in this project.`);
  return presentLayer(row, new Lengths(query.length ?? project.lengthUnit));
}
