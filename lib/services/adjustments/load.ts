import { and, eq, type InferSelectModel } from 'drizzle-orm';
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

/**
 * @param lock until the end of the transaction
 * @throws Problem where the project has no such adjustment
 */
export async function loadAdjustment(
  { db }: Tenant,
  organizationId: string,
  projectId: string,
  id: string,
  lock = false,
): Promise<LoadedAdjustment> {
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
  const [result] = await db
    .select()
    .from(adjustmentResults)
    .where(and(eq(adjustmentResults.organizationId, organizationId), eq(adjustmentResults.adjustmentId, id)));
  return { ...row, result: (result as AdjustmentResultRow | undefined) ?? null };
}

/** @throws Problem where there is no result, or no such adjustment */
export async function loadResult(
  ...of: Parameters<typeof loadAdjustment>
): Promise<LoadedAdjustment & { result: AdjustmentResultRow }> {
  const loaded = await loadAdjustment(...of);
  const { result, jobStatus } = loaded;
  if (!result) throw new Problem('adjustment_not_finished', `Its job is ${jobStatus}.`);
  return { ...loaded, result };
}
