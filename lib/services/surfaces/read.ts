import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/design';
import { loadSurface } from './load';
import { presentSurface } from './present';

type Read = typeof contract.getSurface;

export async function readSurface(
  context: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
) {
  const project = await loadProject(context.tenant, context.caller.organizationId, params.projectId);
  const row = await loadSurface(context, project.id, params.surfaceId);
  return presentSurface(row, new Lengths(query.length ?? project.lengthUnit));
}
