import { and, eq } from 'drizzle-orm';
import { bulkInsert } from '@/db/bulk';
import { adjustmentObservations, adjustmentResults, adjustments } from '@/db/schema';
import { NetworkError, type NetworkResult } from '@/lib/compute/survey/networkResult';
import { Problem } from '@/lib/problem';
import type { Work } from '@/lib/services/jobs/work';
import { record } from '@/lib/services/record';
import { computeNetwork } from './compute';
import { observationCount } from './count';
import { gather } from './gather';
import { judgeAdjustment } from './judge';
import { type AdjustmentInput, type KeptResult, METHOD, METHOD_VERSION, plain } from './result';
import { wordsOfError } from './words';

const insert = bulkInsert({ adjustmentResults, adjustmentObservations });

/** The job of an adjustment: gather what is stored, adjust, keep the result. */
export const adjust: Work = async ({ job, runtime, read, step }) => {
  const { organizationId, subjectId: adjustmentId } = job;
  await step('gather', 0, 3);
  const { request, projectId, name, input } = await read(async (tenant) => {
    const [row] = await tenant.db
      .select()
      .from(adjustments)
      .where(and(eq(adjustments.organizationId, organizationId), eq(adjustments.id, adjustmentId)));
    return { ...row, input: await gather(tenant, row, row.request) };
  });
  await step('adjust', 1, 3);
  const network = await compute(input);
  const { observations, points, setups, ...rest } = network;
  const judged = judgeAdjustment(input, request, network);
  const result: KeptResult = {
    ...rest,
    ...judged,
    points: points.map(plain),
    setups: setups.map(plain),
    observations: observations.length,
  };
  await step('keep', 2, 3);
  return async (context, actor) => {
    const computedAt = runtime.now().toISOString();
    const { verdict } = judged;
    const row = { organizationId, adjustmentId, verdict, method: METHOD, methodVersion: METHOD_VERSION };
    await insert(context.tenant, {
      adjustmentResults: [{ ...row, result, input, computedAt }],
      adjustmentObservations: observations.map((observation, seq) => ({
        organizationId,
        adjustmentId,
        seq,
        kind: observation.kind,
        fromPoint: observation.from,
        toPoint: observation.kind === 'control' ? observation.source : observation.to,
        removed: observation.removed,
        observation,
      })),
    });
    record(context, actor, {
      type: 'adjustment.computed',
      subject: adjustmentId,
      projectId,
      data: { name, verdict, points: points.length, removed: result.removed.length },
    });
  };
};

async function compute(input: AdjustmentInput): Promise<NetworkResult> {
  if (observationCount(input.network) === 0)
    throw new Problem(
      'adjustment_not_computable',
      wordsOfError({ code: 'no_observations', points: [], sources: [] }, input),
    );
  try {
    return await computeNetwork(input.network);
  } catch (error) {
    if (error instanceof NetworkError)
      throw new Problem('adjustment_not_computable', wordsOfError(error, input));
    throw error;
  }
}
