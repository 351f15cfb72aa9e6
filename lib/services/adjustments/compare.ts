import type * as z from 'zod';
import type { EpochComparison, PointDisplacement } from '@/lib/compute/survey/epochComparison';
import { compareEpochs } from '@/lib/compute/survey/epochs';
import { NetworkError } from '@/lib/compute/survey/networkResult';
import { toDegrees } from '@/lib/compute/units/convert';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/adjustments';
import type { AdjustmentComparison } from '@/openapi/schemas/adjustment';
import { observationCount } from './count';
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
  requireSmall(earlier.result.input, later.result.input);
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
    ...wordsOf(found),
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
      text: wordsOfPoint(point, length),
    })),
    onlyEarlier: [...found.onlyBefore],
    onlyLater: [...found.onlyAfter],
    units: { length: length.unit, angle: 'deg' },
  };
}

/** More observations than these take seconds, and a request answers at once. */
const MOST_OBSERVATIONS = 2_000;

function requireSmall(earlier: AdjustmentInput, later: AdjustmentInput): void {
  const count = observationCount(earlier.network) + observationCount(later.network);
  if (count > MOST_OBSERVATIONS) {
    const detail = `Both have ${count} shots and levelled differences; ${MOST_OBSERVATIONS} are the most that are compared.`;
    throw new Problem('comparison_too_large', detail);
  }
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

function wordsOf({ moved, points, remaining, congruence }: EpochComparison) {
  if (points.length === 0)
    return { text: 'The two have no point in common: nothing can be compared.', action: null };
  if (moved.length === 0 && congruence.passed)
    return {
      text: `None of ${points.length} common points has moved beyond what the observations explain.`,
      action: null,
    };
  const action =
    'Look at the marks in the field; call them suspect, and set up on the others until they have new coordinates.';
  const rest = remaining.passed ? 'the others stayed' : 'the others do not agree well either';
  return { text: `Moved: ${moved.join(', ')}; ${rest}.`, action };
}

function wordsOfPoint(
  { easting, northing, elevation, moved, name }: PointDisplacement,
  length: Lengths,
): string {
  const fine = (metres: number) => length.text(metres, length.unit === 'm' ? 4 : 3);
  const plan =
    easting === null || northing === null
      ? []
      : [
          `${fine(Math.hypot(easting, northing))} in plan towards ${toDegrees((Math.atan2(easting, northing) + 2 * Math.PI) % (2 * Math.PI)).toFixed(0)}°`,
        ];
  const height = elevation === null ? [] : [`${fine(Math.abs(elevation))} ${elevation < 0 ? 'down' : 'up'}`];
  const figures = [...plan, ...height].join(' and ');
  return moved
    ? `${name} moved: ${figures}.`
    : `${name} stayed; it differs by ${figures}, as the errors allow.`;
}
