import { and, eq } from 'drizzle-orm';
import { pegTests } from '@/db/schema';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/levelling';
import { selectPegTests } from './load';
import { presentPegTest } from './present';
import type { PegTestRow } from './result';

type Read = typeof contract.getPegTest;

export async function readPegTest(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const wanted = and(
    eq(pegTests.organizationId, caller.organizationId),
    eq(pegTests.projectId, project.id),
    eq(pegTests.id, params.pegTestId),
  );
  const [row] = await selectPegTests(tenant, wanted);
  if (!row) throw new Problem('not_found', 'There is no such two-peg test in this project.');
  return presentPegTest(row as PegTestRow, new Lengths(query.length ?? project.lengthUnit));
}
