import { type UnitMixUp, unitMixUp } from '@/lib/compute/units/mixUp';
import { ROUNDING } from './acceptance';

/** Beyond this, m, no blade is off: something else is wrong. Common practice, about two feet; not a rule. */
export const GROSS_ERROR = 0.6;

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

/** Whether an edge is off by an offset, either way, within the tolerance. @param offset null where none is known */
export function isOffByOffset(difference: number, offset: number | null, tolerance: number): boolean {
  if (offset === null || offset === 0) return false;
  return Math.abs(Math.abs(difference) - Math.abs(offset)) <= tolerance + ROUNDING;
}

/** Whether every repeat is off by more than a blade can be. */
export function isGross(known: number, elevations: readonly number[]): boolean {
  return elevations.every((elevation) => Math.abs(elevation - known) > GROSS_ERROR + ROUNDING);
}

/** The mix-up of units that a gross error looks like. */
export function benchMixUp(read: number, known: number): UnitMixUp | null {
  return unitMixUp([read], [known], GROSS_ERROR);
}
