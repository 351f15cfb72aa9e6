import { and, eq } from 'drizzle-orm';
import { levelRuns } from '@/db/schema';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/levelling';
import type { LevelRunRow } from './load';
import { presentLevelRun } from './present';

type Read = typeof contract.getLevelRun;

export async function readLevelRun(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const [row] = await tenant.db
    .select()
    .from(levelRuns)
    .where(
      and(
        eq(levelRuns.organizationId, caller.organizationId),
        eq(levelRuns.projectId, project.id),
        eq(levelRuns.id, params.levelRunId),
      ),
    );
  if (!row) throw new Problem('not_found', 'There is no such level run in this project.');
  return presentLevelRun(row as LevelRunRow, new Lengths(query.length ?? project.lengthUnit));
}
