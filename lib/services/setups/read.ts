import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/setups';
import { loadSetup } from './load';
import { presentSetup } from './present';

type Read = typeof contract.getSetup;

export async function readSetup(
  { tenant, caller, runtime }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const loaded = await loadSetup(tenant, caller.organizationId, project.id, params.setupId);
  return presentSetup(loaded, new Lengths(query.length ?? project.lengthUnit), runtime.now());
}
