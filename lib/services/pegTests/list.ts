import { and, desc, eq, lt } from 'drizzle-orm';
import { instruments, pegTests } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/levelling';
import { selectPegTests } from './load';
import { presentPegTest } from './present';
import type { PegTestRow } from './result';

type List = typeof contract.listPegTests;

export async function listPegTests(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const list = ['peg-tests', project.id, query.instrument];
  const after = readCursor(list, query.cursor);
  const wanted = and(
    eq(pegTests.organizationId, caller.organizationId),
    eq(pegTests.projectId, project.id),
    query.instrument ? eq(instruments.name, query.instrument) : undefined,
    after === null ? undefined : lt(pegTests.id, after),
  );
  const rows = await selectPegTests(tenant, wanted)
    .orderBy(desc(pegTests.id))
    .limit(query.limit + 1);
  const length = new Lengths(query.length ?? project.lengthUnit);
  return pageOf(
    rows as PegTestRow[],
    query.limit,
    list,
    (row) => row.id,
    (row) => presentPegTest(row, length),
  );
}
