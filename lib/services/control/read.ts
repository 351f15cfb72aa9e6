import type { Tenant } from '@/db/tenant';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/control';
import { loadHealth, presentHealth } from './health';
import { byNames, type CurrentControl, currentControl } from './load';
import { presentControlPoint } from './present';

/** @throws Problem where the project has no point of that name */
export async function loadControlPoint(
  tenant: Tenant,
  organizationId: string,
  projectId: string,
  name: string,
): Promise<CurrentControl> {
  const [row] = await currentControl(tenant, organizationId, projectId, byNames([name]));
  if (!row) throw new Problem('not_found', `There is no control point ${name} in this project.`);
  return row;
}

type Read = typeof contract.getControlPoint;

export async function readControlPoint(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const row = await loadControlPoint(tenant, caller.organizationId, project.id, params.pointName);
  const unit = query.length ?? project.lengthUnit;
  const found = await loadHealth(tenant, project, row);
  return {
    ...presentControlPoint(row, unit),
    health: presentHealth(found, row.point.name, new Lengths(unit)),
  };
}
