import { and, eq, exists, type InferSelectModel, inArray, or, sql } from 'drizzle-orm';
import { levelDifferences, levelRuns } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { KeptSights, LevelRunResult } from './result';

export type LevelRunRow = Omit<InferSelectModel<typeof levelRuns>, 'sights' | 'result'> & {
  sights: KeptSights;
  result: LevelRunResult;
};

/** Runs that begin or end on one of these points, or that passed one as a control point. */
export function touches(tenant: Tenant, organizationId: string, names: readonly string[]) {
  const points = [...names];
  const passing = tenant.db
    .select({ one: sql`1` })
    .from(levelDifferences)
    .where(
      and(
        eq(levelDifferences.organizationId, organizationId),
        eq(levelDifferences.levelRunId, levelRuns.id),
        inArray(levelDifferences.point, points),
      ),
    );
  return or(inArray(levelRuns.fromPoint, points), inArray(levelRuns.toPoint, points), exists(passing));
}
