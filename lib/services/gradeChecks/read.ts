import { and, eq } from 'drizzle-orm';
import { gradeChecks } from '@/db/schema';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { layerFacts } from '@/lib/services/layers/facts';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import { voidOf } from '@/lib/services/setups/standing';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/grade';
import { presentGradeCheck } from './present';

type Read = typeof contract.getGradeCheck;

export async function readGradeCheck(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const [row] = await tenant.db
    .select()
    .from(gradeChecks)
    .where(
      and(
        eq(gradeChecks.organizationId, caller.organizationId),
        eq(gradeChecks.projectId, project.id),
        eq(gradeChecks.id, params.gradeCheckId),
      ),
    );
  if (!row) throw new Problem('not_found', 'There is no such grade check in this project.');
  const layerOf = await layerFacts(tenant, project, [row]);
  const voided = await voidOf(tenant, caller.organizationId, [row]);
  return presentGradeCheck(
    row,
    layerOf(row),
    new Lengths(query.length ?? project.lengthUnit),
    project.displayDecimals,
    voided(row),
  );
}
