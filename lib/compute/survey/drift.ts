import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { globalTest } from '@/lib/compute/adjustment/globalTest';
import { ifDetermined } from '@/lib/compute/adjustment/model';
import { solve } from '@/lib/compute/adjustment/solve';
import { suspiciousStart, withSuspicions } from '@/lib/compute/adjustment/suspicions';
import { chiSquareQuantile } from '@/lib/compute/statistics/distributions';
import type { FittedSetup, LaterShots } from './checkShots';
import { quadraticForm } from './displacement';
import { type LaterModel, laterModel, movable, STEADY_STATION, type StationMove } from './laterModel';
import { AXIS, EASTING, NORTHING, ORIENTATION } from './stationModel';

/** A value with its standard deviation, m or rad. */
export interface Estimate {
  value: number;
  sigma: number;
}

/** How an instrument stands later against the fit, by marks of the fit that were shot again: later minus first. */
export interface Drift {
  /** Marks of the fit that tell it. */
  marks: string[];
  /** Null where one mark alone was shot again: it tells a turn from a shift no more than two unknowns from one. */
  easting: Estimate | null;
  northing: Estimate | null;
  /** Null where one mark has no elevation or the setup no height. */
  height: Estimate | null;
  /** Of the circle's zero, clockwise. */
  orientation: Estimate;
  test: { statistic: number; critical: number; degreesOfFreedom: number };
  /** More than one steady instrument in a hundred would show. */
  significant: boolean;
}

/** Chance that an instrument which stands still seems to drift: common practice. */
export const FALSE_DRIFT = 0.01;

/**
 * Drift of a setup since its fit: shift, rise and turn of the instrument as further unknowns of the later shots, the
 * marks' own errors cancelling as far as the fit had them already. With two marks or more all of it; with one mark the
 * instrument is taken to stand on its place, and its turn and rise are told.
 *
 * @returns null where no mark of the fit was shot again
 */
export function driftOf(input: LaterShots & FittedSetup): Drift | null {
  const shots = input.shots.filter(({ target }) => input.crossCovariance.has(target));
  const steady = ifDetermined(() => laterModel({ ...input, shots }));
  if (!steady) return null;
  const marks = [...new Set(steady.sights.map(({ mark }) => mark.name))];
  const height = steady.sights.some(({ mark }) => mark.elevation !== null) && input.heightDetermined;
  const unknowns = movable(height).filter(
    (unknown) => marks.length > 1 || unknown === AXIS || unknown === ORIENTATION,
  );
  const moved = movedStation({ ...input, shots }, unknowns);
  if (!moved) return null;
  const { estimate, covariance, variance } = moved;
  const part = (unknown: number): Estimate | null => {
    const i = unknowns.indexOf(unknown);
    return i < 0
      ? null
      : { value: estimate[i], sigma: Math.sqrt(variance * covariance[i * (unknowns.length + 1)]) };
  };
  const statistic = quadraticForm(Float64Array.from(estimate), covariance) / variance;
  const critical = chiSquareQuantile(1 - FALSE_DRIFT, unknowns.length);
  return {
    marks,
    easting: part(EASTING),
    northing: part(NORTHING),
    height: part(AXIS),
    orientation: part(ORIENTATION)!,
    test: { statistic, critical, degreesOfFreedom: unknowns.length },
    significant: statistic > critical,
  };
}

/** A fault of later shots, estimated beside everything else. */
export interface EstimatedFault {
  estimate: number[];
  /** Its covariance with the a-priori variance factor 1, row by row. */
  covariance: Float64Array;
  /** σ₀² where more scatter is left than stated, else 1. */
  variance: number;
  /** vᵀPv with the fault taken out. */
  weightedSquares: number;
}

const UNKNOWN_OF: Readonly<Record<number, keyof StationMove>> = {
  [EASTING]: 'easting',
  [NORTHING]: 'northing',
  [AXIS]: 'axis',
  [ORIENTATION]: 'orientation',
};

/**
 * Later shots with the instrument elsewhere than it was fitted, estimated twice: the second time about the first
 * answer, since a turn of a degree is not small.
 *
 * @param unknowns what may have changed of the station
 * @returns null where the shots do not determine it
 */
export function movedStation(
  input: LaterShots & FittedSetup,
  unknowns: readonly number[],
): EstimatedFault | null {
  let about = STEADY_STATION;
  let answer: EstimatedFault | null = null;
  for (let pass = 0; pass < 2; pass++) {
    const model = ifDetermined(() => laterModel(input, about));
    const step = model && suspected(model, stationEntries(model, unknowns), unknowns.length);
    if (!step) return null;
    const estimate = step.estimate.map((value, i) => about[UNKNOWN_OF[unknowns[i]]] + value);
    answer = { ...step, estimate };
    about = { ...STEADY_STATION };
    unknowns.forEach((unknown, i) => {
      about = { ...about, [UNKNOWN_OF[unknown]]: estimate[i] };
    });
  }
  return answer;
}

/** How a move of the station enters the rows: as its own errors do. */
function stationEntries({ rowsOfSight }: LaterModel, unknowns: readonly number[]) {
  return rowsOfSight
    .flat()
    .flatMap(({ row, station }) =>
      unknowns.map((unknown, fault) => ({ row, fault, coefficient: station[unknown] })),
    );
}

/** Faults of later shots, estimated beside everything else; null where the shots do not determine them. */
export function suspected(
  model: LaterModel,
  entries: Parameters<typeof withSuspicions>[2],
  count: number,
): EstimatedFault | null {
  return ifDetermined(() => {
    const solution = solve(
      withSuspicions(model, count, entries),
      suspiciousStart(model, new Float64Array(model.unknowns), count),
    );
    const cofactors = new Cofactors(solution);
    const { weightedSquares, degreesOfFreedom } = solution;
    const test = globalTest(weightedSquares, degreesOfFreedom);
    return {
      estimate: Array.from({ length: count }, (_, i) => solution.unknowns[model.shared + i]),
      covariance: Float64Array.from({ length: count * count }, (_, i) =>
        cofactors.of(model.shared + Math.floor(i / count), model.shared + (i % count)),
      ),
      variance: test.passed ? 1 : test.sigma0 ** 2,
      weightedSquares,
    };
  });
}
