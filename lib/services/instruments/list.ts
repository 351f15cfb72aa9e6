import { asc, gt } from 'drizzle-orm';
import { instruments } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/instruments';
import { Name } from '@/openapi/schemas/primitives';
import { currentInstruments } from './load';
import { presentInstrument } from './present';

type List = typeof contract.listInstruments;

export async function listInstruments(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const list = ['instruments', project.id];
  const after = readCursor(list, query.cursor, Name);
  const further = after === null ? undefined : gt(instruments.name, after);
  const rows = await currentInstruments(tenant, caller.organizationId, project.id, further)
    .orderBy(asc(instruments.name))
    .limit(query.limit + 1);
  return pageOf(rows, query.limit, list, (row) => row.instrument.name, presentInstrument);
}
