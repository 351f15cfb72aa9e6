import { and, desc, eq, gt, isNull, lt, lte, or, type SQL } from 'drizzle-orm';
import { setups } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/setups';
import { completeSetups } from './load';
import { presentSetup } from './present';

type List = typeof contract.listSetups;

export async function listSetups(
  { tenant, caller, runtime }: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const now = runtime.now();
  const list = ['setups', project.id, query.verdict, query.status, query.station];
  const after = readCursor(list, query.cursor);
  const rows = await tenant.db
    .select()
    .from(setups)
    .where(
      and(
        eq(setups.organizationId, organizationId),
        eq(setups.projectId, project.id),
        query.verdict ? eq(setups.verdict, query.verdict) : undefined,
        query.station ? eq(setups.station, query.station) : undefined,
        query.status ? hasStatus(query.status, now) : undefined,
        after === null ? undefined : lt(setups.id, after),
      ),
    )
    .orderBy(desc(setups.id))
    .limit(query.limit + 1);
  const complete = await completeSetups(tenant, organizationId, rows);
  const length = new Lengths(query.length ?? project.lengthUnit);
  return pageOf(
    complete,
    query.limit,
    list,
    (row) => row.setup.id,
    (row) => presentSetup(row, length, now),
  );
}

/** Expiry is derived from the clock, so `released` and `expired` are told apart by it. */
function hasStatus(status: NonNullable<QueryOf<List>['status']>, now: Date): SQL | undefined {
  const at = now.toISOString();
  if (status === 'expired') return and(eq(setups.state, 'released'), lte(setups.validUntil, at));
  if (status === 'released') {
    return and(eq(setups.state, 'released'), or(isNull(setups.validUntil), gt(setups.validUntil, at)));
  }
  return eq(setups.state, status);
}
