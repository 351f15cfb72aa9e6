import { and, eq, type InferSelectModel, type SQL, sql } from 'drizzle-orm';
import { adjustmentResults, adjustments, jobs } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { Problem } from '@/lib/problem';
import type { AdjustmentInput, KeptResult } from './result';

export type AdjustmentRow = InferSelectModel<typeof adjustments>;
export type AdjustmentResultRow = Omit<InferSelectModel<typeof adjustmentResults>, 'result' | 'input'> & {
  result: KeptResult;
  input: AdjustmentInput;
};

export interface LoadedAdjustment {
  adjustment: AdjustmentRow;
  jobStatus: InferSelectModel<typeof jobs>['status'];
  result: AdjustmentResultRow | null;
}

export interface LoadedResult extends LoadedAdjustment {
  result: AdjustmentResultRow;
}

/** Setups and level runs that observations come from. */
export type Sources = Pick<AdjustmentInput, 'setups' | 'levelRuns'>;

/**
 * @param lock until the end of the transaction
 * @throws Problem where the project has no such adjustment
 */
export async function loadAdjustment(
  tenant: Tenant,
  organizationId: string,
  projectId: string,
  id: string,
  lock = false,
): Promise<LoadedAdjustment> {
  const row = await findAdjustment(tenant, organizationId, projectId, id, lock);
  const [result] = await tenant.db.select().from(adjustmentResults).where(resultOf(row.adjustment));
  return { ...row, result: (result as AdjustmentResultRow | undefined) ?? null };
}

/**
 * Where the observations of a result come from, without the network itself, which may be large.
 *
 * @throws Problem where there is no result, or no such adjustment
 */
export async function loadSources(
  tenant: Tenant,
  organizationId: string,
  projectId: string,
  id: string,
): Promise<Sources> {
  const { adjustment, jobStatus } = await findAdjustment(tenant, organizationId, projectId, id);
  const part = <K extends keyof Sources>(key: K) =>
    sql<Sources[K]>`${adjustmentResults.input} -> ${key}::text`;
  const [sources] = await tenant.db
    .select({ setups: part('setups'), levelRuns: part('levelRuns') })
    .from(adjustmentResults)
    .where(resultOf(adjustment));
  if (!sources) throw notFinished(jobStatus);
  return sources;
}

async function findAdjustment(
  { db }: Tenant,
  organizationId: string,
  projectId: string,
  id: string,
  lock = false,
): Promise<Omit<LoadedAdjustment, 'result'>> {
  const query = db
    .select({ adjustment: adjustments, jobStatus: jobs.status })
    .from(adjustments)
    .innerJoin(jobs, and(eq(jobs.organizationId, adjustments.organizationId), eq(jobs.id, adjustments.jobId)))
    .where(
      and(
        eq(adjustments.organizationId, organizationId),
        eq(adjustments.projectId, projectId),
        eq(adjustments.id, id),
      ),
    );
  const [row] = await (lock ? query.for('update', { of: adjustments }) : query);
  if (!row) throw new Problem('not_found', 'There is no such adjustment in this project.');
  return row;
}

function resultOf({ organizationId, id }: AdjustmentRow): SQL | undefined {
  return and(eq(adjustmentResults.organizationId, organizationId), eq(adjustmentResults.adjustmentId, id));
}

function notFinished(jobStatus: LoadedAdjustment['jobStatus']): Problem {
  return new Problem('adjustment_not_finished', `Its job is ${jobStatus}.`);
}

/** @throws Problem where there is no result, or no such adjustment */
export async function loadResult(...of: Parameters<typeof loadAdjustment>): Promise<LoadedResult> {
  const loaded = await loadAdjustment(...of);
  const { result, jobStatus } = loaded;
  if (!result) throw notFinished(jobStatus);
  return { ...loaded, result };
}
