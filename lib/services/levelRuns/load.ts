import { and, eq, exists, type InferSelectModel, or, sql } from 'drizzle-orm';
import { levelDifferences, levelRuns } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { KeptSights, LevelRunResult } from './result';

export type LevelRunRow = Omit<InferSelectModel<typeof levelRuns>, 'sights' | 'result'> & {
  sights: KeptSights;
  result: LevelRunResult;
};

/** Runs that begin or end on a point, or that passed it as a control point. */
export function touches(tenant: Tenant, organizationId: string, point: string) {
  const passing = tenant.db
    .select({ one: sql`1` })
    .from(levelDifferences)
    .where(
      and(
        eq(levelDifferences.organizationId, organizationId),
        eq(levelDifferences.levelRunId, levelRuns.id),
        eq(levelDifferences.point, point),
      ),
    );
  return or(eq(levelRuns.fromPoint, point), eq(levelRuns.toPoint, point), exists(passing));
}
