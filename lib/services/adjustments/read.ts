import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/adjustments';
import { loadAdjustment } from './load';
import { namedObservations } from './observations';
import { presentAdjustment } from './present';

type Read = typeof contract.getAdjustment;

export async function readAdjustment(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const loaded = await loadAdjustment(tenant, caller.organizationId, project.id, params.adjustmentId);
  const named = await namedObservations(tenant, loaded);
  return presentAdjustment(loaded, named, new Lengths(query.length ?? project.lengthUnit));
}
