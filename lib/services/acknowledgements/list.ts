import { and, desc, eq, isNotNull, isNull, lt } from 'drizzle-orm';
import { acknowledgements } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/setups';
import { selectAcknowledgements } from './load';
import { presentAcknowledgement } from './present';

type List = typeof contract.listAcknowledgements;

export async function listAcknowledgements(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const list = ['acknowledgements', project.id, query.open];
  const after = readCursor(list, query.cursor);
  const state = {
    true: isNull(acknowledgements.acknowledgedAt),
    false: isNotNull(acknowledgements.acknowledgedAt),
  };
  const rows = await selectAcknowledgements(tenant)
    .where(
      and(
        eq(acknowledgements.organizationId, organizationId),
        eq(acknowledgements.projectId, project.id),
        query.open ? state[query.open] : undefined,
        after === null ? undefined : lt(acknowledgements.id, after),
      ),
    )
    .orderBy(desc(acknowledgements.id))
    .limit(query.limit + 1);
  return pageOf(rows, query.limit, list, ({ row }) => row.id, presentAcknowledgement);
}
