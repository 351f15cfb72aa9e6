import { and, asc, eq, gt, inArray, or } from 'drizzle-orm';
import * as z from 'zod';
import { adjustmentObservations } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { NetworkObservation } from '@/lib/compute/survey/networkResult';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/adjustments';
import { type LoadedAdjustment, loadSources } from './load';
import { presentObservation } from './present';

type List = typeof contract.listAdjustmentObservations;

const Place = z.string().regex(/^\d{1,9}$/);

export async function listAdjustmentObservations(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const { adjustmentId } = params;
  const sources = await loadSources(tenant, organizationId, project.id, adjustmentId);
  const list = ['adjustmentObservations', adjustmentId, query.point, query.removed];
  const after = readCursor(list, query.cursor, Place);
  const rows = await tenant.db
    .select()
    .from(adjustmentObservations)
    .where(
      and(
        eq(adjustmentObservations.organizationId, organizationId),
        eq(adjustmentObservations.adjustmentId, adjustmentId),
        query.point === undefined
          ? undefined
          : or(
              eq(adjustmentObservations.fromPoint, query.point),
              eq(adjustmentObservations.toPoint, query.point),
            ),
        query.removed === undefined
          ? undefined
          : eq(adjustmentObservations.removed, query.removed === 'true'),
        after === null ? undefined : gt(adjustmentObservations.seq, Number(after)),
      ),
    )
    .orderBy(asc(adjustmentObservations.seq))
    .limit(query.limit + 1);
  const length = new Lengths(query.length ?? project.lengthUnit);
  return pageOf(
    rows,
    query.limit,
    list,
    ({ seq }) => String(seq),
    ({ seq, observation }) => presentObservation(observation as NetworkObservation, seq, sources, length),
  );
}

/** The observations that a result speaks of: those that were taken out, and the one that fits worst. */
export async function namedObservations(
  { db }: Tenant,
  { adjustment, result: row }: LoadedAdjustment,
): Promise<Map<number, NetworkObservation>> {
  if (!row) return new Map();
  const { removed, reasons } = row.result;
  const numbers = [
    ...removed.flatMap(({ observation, alternatives }) => [observation, ...alternatives]),
    ...reasons.flatMap((reason) => (reason.code === 'observation_outlier' ? reason.observation : [])),
  ];
  if (numbers.length === 0) return new Map();
  const rows = await db
    .select()
    .from(adjustmentObservations)
    .where(
      and(
        eq(adjustmentObservations.organizationId, adjustment.organizationId),
        eq(adjustmentObservations.adjustmentId, adjustment.id),
        inArray(adjustmentObservations.seq, numbers),
      ),
    );
  return new Map(rows.map(({ seq, observation }) => [seq, observation as NetworkObservation]));
}
