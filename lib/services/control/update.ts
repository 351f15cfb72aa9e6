import { and, eq } from 'drizzle-orm';
import { controlPoints, type StatusAct } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { loadProject } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import type { JsonOf, ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/control';
import { presentControlPoint } from './present';
import { loadControlPoint } from './read';

type Update = typeof contract.updateControlPoint;

/** Trusts, suspects or quarantines a point; its versions stay as they are. */
export async function updateControlPoint(
  context: VerbContext,
  { params, query, body }: { params: ParamsOf<Update>; query: QueryOf<Update>; body: JsonOf<Update> },
) {
  const { tenant, caller, runtime } = context;
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const row = await loadControlPoint(tenant, caller.organizationId, project.id, params.pointName);
  const updatedAt = runtime.now().toISOString();
  const statusAct: StatusAct = {
    by: { kind: caller.kind, name: caller.name },
    at: updatedAt,
    note: body.note,
    seen: null,
  };
  await tenant.db
    .update(controlPoints)
    .set({ status: body.status, statusAct, updatedAt })
    .where(
      and(
        eq(controlPoints.organizationId, caller.organizationId),
        eq(controlPoints.projectId, project.id),
        eq(controlPoints.name, row.point.name),
      ),
    );
  record(context, caller, {
    type: `control.${body.status}`,
    subject: row.point.name,
    projectId: project.id,
    data: { from: row.point.status, to: body.status, note: body.note },
  });
  const point = { ...row.point, status: body.status, statusAct, updatedAt };
  return presentControlPoint({ ...row, point }, query.length ?? project.lengthUnit);
}
