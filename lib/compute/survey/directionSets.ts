import { chiSquareQuantile } from '@/lib/compute/statistics/distributions';
import { wrapDifference, wrapTurn } from '@/lib/compute/units/angles';
import type { Erection, Reading } from './faces';

/** Sets of directions to the same reflectors, meaned, with the spread that they show themselves. */
export interface DirectionSets {
  sets: number;
  directions: {
    target: string;
    /** Mean reading of the circle, in the orientation of the first set, rad. */
    mean: number;
    /** Largest departure of a set from the mean, rad. */
    largest: number;
  }[];
  degreesOfFreedom: number;
  /** Standard deviation of a direction read in one set, and of the mean of all sets, rad. */
  ofOneSet: number;
  ofMean: number;
  /** Stated for one set as it was read, in one face or in both, rad. */
  stated: number;
  /** The spread is no larger than stated, upper-tail test at 95 %. */
  asStated: boolean;
}

/**
 * Mean and experimental standard deviation of sets of directions (ISO 17123-3, full procedure): each set is turned
 * onto the mean of all, s² = Σr²/((n − 1)(t − 1)) of n sets and t targets. Reflectors that were not read in every set
 * take no part. Null where fewer than two of either are left.
 */
export function directionSets(
  readings: readonly Reading[],
  erections: readonly Erection[],
): DirectionSets | null {
  const own = readings.filter(({ kind }) => kind === 'direction');
  const sets = [...new Set(own.map(({ set }) => set))];
  const bySet = sets.map((set) => own.filter((reading) => reading.set === set));
  const common = [...new Set(own.map(({ erection }) => erection))].filter((erection) =>
    bySet.every((readingsOfSet) => readingsOfSet.some((reading) => reading.erection === erection)),
  );
  if (sets.length < 2 || common.length < 2) return null;
  const table = bySet.map((readingsOfSet) =>
    common.map((erection) => readingsOfSet.find((reading) => reading.erection === erection)!),
  );
  // Against the first set, so that nothing straddles the circle's zero.
  const [first] = table;
  const departures = table.map((row) => row.map(({ value }, t) => wrapDifference(value - first[t].value)));
  const turns = departures.map(mean);
  const meanTurn = mean(turns);
  const means = common.map((_, t) => mean(departures.map((row) => row[t])));
  const residuals = departures.map((row, s) => row.map((d, t) => d - turns[s] - (means[t] - meanTurn)));
  const degreesOfFreedom = (sets.length - 1) * (common.length - 1);
  const squares = residuals.flat().reduce((sum, r) => sum + r * r, 0);
  const stated = Math.sqrt(mean(table.flat().map(({ sigma }) => sigma ** 2)));
  const ofOneSet = Math.sqrt(squares / degreesOfFreedom);
  return {
    sets: sets.length,
    directions: common.map((erection, t) => ({
      target: erections[erection].target,
      mean: wrapTurn(first[t].value + means[t] - meanTurn),
      largest: Math.max(...residuals.map((row) => Math.abs(row[t]))),
    })),
    degreesOfFreedom,
    ofOneSet,
    ofMean: ofOneSet / Math.sqrt(sets.length),
    stated,
    asStated: squares / stated ** 2 <= chiSquareQuantile(0.95, degreesOfFreedom),
  };
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
