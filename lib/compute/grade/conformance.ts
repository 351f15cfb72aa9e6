import { normalCdf } from '@/lib/compute/statistics/distributions';
import { isWithin } from './acceptance';
import type { SurfaceHeight } from './surface';

/** How far ground may lie under and over its layer, m, both positive. */
export interface GradeTolerance {
  below: number;
  above: number;
}

export type GradeVerdict = 'pass' | 'hold' | 'fail';

export interface Conformance {
  /** Probability that the true deviation lies within the tolerance. */
  probability: number;
  verdict: GradeVerdict;
  /** No reading with this uncertainty could reach 0.95. */
  notCapable: boolean;
}

export const ENOUGH = 0.95;

/** Vertical deviation of ground from a layer, positive = high, and its standard deviation. */
export function deviationFrom(
  design: SurfaceHeight,
  offset: number,
  elevation: number,
  covariance: ArrayLike<number> | null,
): { deviation: number; normal: number; standardDeviation: number | null } {
  const deviation = elevation - (design.elevation + offset);
  const { gradientEast: e, gradientNorth: n } = design;
  const normal = deviation / Math.sqrt(1 + e * e + n * n);
  if (!covariance) return { deviation, normal, standardDeviation: null };
  const q = covariance;
  const variance = q[8] + e * e * q[0] + n * n * q[4] + 2 * e * n * q[1] - 2 * (e * q[2] + n * q[5]);
  return { deviation, normal, standardDeviation: Math.sqrt(Math.max(0, variance)) };
}

/**
 * Conformance with a two-sided tolerance, JCGM 106:2012, 7.4, normal distribution about the reading:
 * p = Φ((above − d)/u) − Φ((−below − d)/u). Pass at p ≥ 0.95, fail at p ≤ 0.05, hold between ("too close to
 * call"). Without an uncertainty the reading is judged as read.
 */
export function conformance(
  deviation: number,
  uncertainty: number | null,
  tolerance: GradeTolerance,
): Conformance {
  const { below, above } = tolerance;
  if (!uncertainty) {
    const inside = isWithin(deviation, tolerance);
    return { probability: inside ? 1 : 0, verdict: inside ? 'pass' : 'fail', notCapable: false };
  }
  const within = (d: number) => normalCdf((above - d) / uncertainty) - normalCdf((-below - d) / uncertainty);
  const probability = within(deviation);
  return {
    probability,
    verdict: probability >= ENOUGH ? 'pass' : probability <= 1 - ENOUGH ? 'fail' : 'hold',
    notCapable: within((above - below) / 2) < ENOUGH,
  };
}
