import type { VerbContext } from '@/lib/services/context';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/instruments';
import { loadInstrument } from './load';
import { presentInstrument } from './present';

export async function readInstrument(
  { tenant, caller }: VerbContext,
  { params }: { params: ParamsOf<typeof contract.getInstrument> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  return presentInstrument(
    await loadInstrument(tenant, caller.organizationId, project.id, params.instrumentName),
  );
}
