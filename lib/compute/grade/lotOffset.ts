import { isWithin } from './acceptance';
import type { GradeTolerance } from './conformance';

/** An offset stands clear of the tolerance from so many times its wider side on; under that a lot may just be high. */
export const CLEAR = 2;

/** At least this share of a lot must lie there: a mean between two heaps of readings says nothing. */
export const MOST = 0.5;

/**
 * Whether a lot as a whole lies off by its layer's own offset: its mean, and most of its readings, lie within the
 * tolerance of the layer plus or minus the offset. Answers that shift, or null.
 *
 * @param deviations ground minus layer, m
 */
export function shiftByOffset(
  deviations: readonly number[],
  offset: number,
  tolerance: GradeTolerance,
): number | null {
  if (deviations.length === 0) return null;
  if (Math.abs(offset) <= CLEAR * Math.max(tolerance.below, tolerance.above)) return null;
  const mean = deviations.reduce((sum, deviation) => sum + deviation, 0) / deviations.length;
  const isThere = (shift: number) =>
    isWithin(mean - shift, tolerance) &&
    deviations.filter((deviation) => isWithin(deviation - shift, tolerance)).length >=
      MOST * deviations.length;
  return [-offset, offset].find(isThere) ?? null;
}
