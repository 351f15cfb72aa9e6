import { ELLIPSE_95, fQuantileTwo } from '@/lib/compute/statistics/distributions';

export interface Ellipse {
  semiMajor: number;
  semiMinor: number;
  /** Of the major axis, clockwise from north, in [0, π). */
  azimuth: number;
}

/**
 * Standard error ellipse of an east/north covariance (Mikhail and Gracie, Analysis and Adjustment of Survey
 * Measurements, §9.3): axes are the square roots of the eigenvalues.
 */
export function standardEllipse(varianceEast: number, varianceNorth: number, covariance: number): Ellipse {
  const mean = (varianceEast + varianceNorth) / 2;
  const spread = Math.hypot((varianceNorth - varianceEast) / 2, covariance);
  const azimuth = Math.atan2(2 * covariance, varianceNorth - varianceEast) / 2;
  return {
    semiMajor: Math.sqrt(mean + spread),
    semiMinor: Math.sqrt(Math.max(0, mean - spread)),
    azimuth: azimuth < 0 ? (azimuth + Math.PI) % Math.PI : azimuth,
  };
}

/**
 * Factor from the standard to the 95 % ellipse: √5.991 where the a-priori variance factor stands, √(2F₀.₉₅(2, ν))
 * where it was estimated from ν degrees of freedom.
 */
export function ellipseFactor95(estimatedFrom: number | null): number {
  return estimatedFrom === null ? ELLIPSE_95 : Math.sqrt(2 * fQuantileTwo(0.95, estimatedFrom));
}
