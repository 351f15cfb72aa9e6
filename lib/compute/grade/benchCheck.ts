import { ROUNDING } from './acceptance';

export interface BenchReading {
  /** Mean of the repeats, m. */
  read: number;
  /** Largest minus smallest repeat, m; null for a single reading. */
  spread: number | null;
  /** Read minus known: negative where the edge reads low. */
  difference: number;
  verdict: 'pass' | 'hold' | 'fail';
  /** The repeats differ among themselves by more than the tolerance. */
  unsteady: boolean;
}

/**
 * A cutting edge held on a mark of known elevation. Fails where the mean of the repeats is off by more than the
 * tolerance; holds where the repeats do not agree among themselves within it.
 *
 * @param elevations repeats, at least one, m
 */
export function benchReading(known: number, elevations: readonly number[], tolerance: number): BenchReading {
  const read = elevations.reduce((sum, e) => sum + e, 0) / elevations.length;
  const spread = elevations.length > 1 ? Math.max(...elevations) - Math.min(...elevations) : null;
  const difference = read - known;
  const unsteady = spread !== null && spread > tolerance + ROUNDING;
  return {
    read,
    spread,
    difference,
    unsteady,
    verdict: unsteady ? 'hold' : Math.abs(difference) > tolerance + ROUNDING ? 'fail' : 'pass',
  };
}
