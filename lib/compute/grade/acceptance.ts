import { betaDistribution } from '@/lib/compute/statistics/distributions';
import type { GradeTolerance } from './conformance';

export interface DeviationStatistics {
  count: number;
  mean: number | null;
  /** n − 1; null under two readings. */
  standardDeviation: number | null;
  /** About zero. */
  rmse: number | null;
  withinTolerance: number;
  /** Null under three readings. */
  percentWithinLimits: number | null;
}

/** Bias, spread and share within tolerance of plain readings, m. */
export function deviationStatistics(
  deviations: readonly number[],
  tolerance: GradeTolerance,
): DeviationStatistics {
  const count = deviations.length;
  const withinTolerance = deviations.filter((d) => isWithin(d, tolerance)).length;
  if (count === 0) {
    const none = { mean: null, standardDeviation: null, rmse: null, percentWithinLimits: null };
    return { count, withinTolerance, ...none };
  }
  const mean = deviations.reduce((sum, d) => sum + d, 0) / count;
  const rmse = Math.sqrt(deviations.reduce((sum, d) => sum + d * d, 0) / count);
  const squares = deviations.reduce((sum, d) => sum + (d - mean) ** 2, 0);
  const standardDeviation = count > 1 ? Math.sqrt(squares / (count - 1)) : null;
  const percentWithinLimits =
    count < 3 || standardDeviation === null ? null : percentWithin(mean, standardDeviation, count, tolerance);
  return { count, mean, standardDeviation, rmse, withinTolerance, percentWithinLimits };
}

/** What units and subtraction leave over, m: a reading of 400.05 ft is 0.05 ft above 400 ft, not a hair more. */
export const ROUNDING = 1e-10;

/** Whether a reading lies within its limits, the limits included. */
export function isWithin(deviation: number, { below, above }: GradeTolerance): boolean {
  return deviation >= -below - ROUNDING && deviation <= above + ROUNDING;
}

function percentWithin(mean: number, s: number, n: number, { below, above }: GradeTolerance): number {
  if (s === 0) return isWithin(mean, { below, above }) ? 100 : 0;
  return Math.max(0, percentUnder((above - mean) / s, n) + percentUnder((mean + below) / s, n) - 100);
}

/**
 * Percent within one limit from its quality index Q = (limit − mean)/s, the standard-deviation method of FHWA
 * Technical Advisory T 5080.12 and AASHTO R 9: 100·(1 − B(½ − Q√n/(2(n−1)))), B the distribution function of
 * Beta(n/2 − 1, n/2 − 1).
 *
 * @param n number of readings, at least 3
 */
export function percentUnder(q: number, n: number): number {
  const x = 0.5 - (q * Math.sqrt(n)) / (2 * (n - 1));
  if (x <= 0) return 100;
  if (x >= 1) return 0;
  return 100 * (1 - betaDistribution(x, n / 2 - 1, n / 2 - 1));
}

/** Whether at least `required` of every `of` readings in a row are within tolerance; null under `of` readings. */
export function windowRule(within: readonly boolean[], required: number, of: number): boolean | null {
  if (within.length < of) return null;
  let inside = 0;
  for (let i = 0; i < within.length; i++) {
    if (within[i]) inside++;
    if (i >= of && within[i - of]) inside--;
    if (i >= of - 1 && inside < required) return false;
  }
  return true;
}
