import { and, eq } from 'drizzle-orm';
import { benchChecks } from '@/db/schema';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import { voidOf } from '@/lib/services/setups/standing';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/grade';
import { selectBenchChecks } from './load';
import { presentBenchCheck } from './present';

type Read = typeof contract.getBenchCheck;

export async function readBenchCheck(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const wanted = and(
    eq(benchChecks.organizationId, caller.organizationId),
    eq(benchChecks.projectId, project.id),
    eq(benchChecks.id, params.benchCheckId),
  );
  const [row] = await selectBenchChecks(tenant, wanted);
  if (!row) throw new Problem('not_found', 'There is no such bench check in this project.');
  const voided = await voidOf(tenant, caller.organizationId, [row]);
  return presentBenchCheck(row, new Lengths(query.length ?? project.lengthUnit), voided(row));
}
