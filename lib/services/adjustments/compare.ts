import type * as z from 'zod';
import type { EpochComparison } from '@/lib/compute/survey/epochComparison';
import { compareEpochs } from '@/lib/compute/survey/epochs';
import { NetworkError } from '@/lib/compute/survey/networkResult';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/adjustments';
import type { AdjustmentComparison } from '@/openapi/schemas/adjustment';
import { requireComparable } from './comparisonLimit';
import { wordsOfComparison, wordsOfDisplacement } from './comparisonWords';
import { type LoadedResult, loadResult } from './load';
import { presentCoordinates, presentEllipse } from './present';
import type { AdjustmentInput } from './result';
import { wordsOfError } from './words';

type Compare = typeof contract.compareAdjustments;

/** Which points moved between two adjustments of a project: computed when both are read. */
export async function compareAdjustments(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Compare>; query: QueryOf<Compare> },
): Promise<() => z.output<typeof AdjustmentComparison>> {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const load = (id: string) => loadResult(tenant, caller.organizationId, project.id, id);
  const later = await load(params.adjustmentId);
  const earlier = await load(query.with);
  requireComparable(earlier.result.input.network, later.result.input.network);
  return () => presentComparison(earlier, later, new Lengths(query.length ?? project.lengthUnit));
}

function presentComparison(
  earlier: LoadedResult,
  later: LoadedResult,
  length: Lengths,
): z.output<typeof AdjustmentComparison> {
  const found = compare(earlier.result.input, later.result.input);
  return {
    earlier: earlier.adjustment.id,
    later: later.adjustment.id,
    ...wordsOfComparison(found),
    congruence: found.congruence,
    remaining: found.remaining,
    moved: [...found.moved],
    points: found.points.map((point) => ({
      name: point.name,
      moved: point.moved,
      displacement: presentCoordinates(point, length),
      errorEllipse: presentEllipse(point.ellipse95, length),
      elevationSigma: point.elevation === null ? null : length.out(Math.sqrt(point.covariance[8])),
      test: {
        value: point.value,
        critical: point.critical,
        degreesOfFreedom: point.degreesOfFreedom,
        probability: point.probability,
      },
      text: wordsOfDisplacement(point, found.remaining, length),
    })),
    onlyEarlier: [...found.onlyBefore],
    onlyLater: [...found.onlyAfter],
    units: { length: length.unit, angle: 'deg' },
  };
}

function compare(earlier: AdjustmentInput, later: AdjustmentInput): EpochComparison {
  try {
    return compareEpochs(earlier.network, later.network);
  } catch (error) {
    if (!(error instanceof NetworkError)) throw error;
    const input = { ...later, setups: [...earlier.setups, ...later.setups] };
    throw new Problem('adjustment_not_computable', wordsOfError(error, input));
  }
}
