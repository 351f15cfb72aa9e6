import { NORMAL_95 } from '@/lib/compute/statistics/distributions';
import { STATION_UNKNOWNS, type Station } from './polarPoint';
import type { Surroundings } from './surroundings';

export interface WorkAccuracy {
  /** 95 % half-widths (1.96 standard deviations) of a point at the working radius, m. */
  horizontal: number;
  vertical: number;
}

const RAYS = Array.from({ length: 72 }, (_, i) => {
  const azimuth = (i * Math.PI) / 36;
  return { sine: Math.sin(azimuth), cosine: Math.cos(azimuth) };
});

/**
 * What a setup can do at a distance. Horizontal: the station and the orientation as a lever of that length, in
 * the worst direction. Vertical: the axis, the zenith angle and refraction over that length.
 *
 * @param zenithSigma stated standard deviation of a zenith angle, rad
 * @param radius ground distance, m
 */
export function accuracyAtWork(
  station: Station,
  zenithSigma: number,
  radius: number,
  { combinedFactor, earthRadius }: Surroundings,
): WorkAccuracy {
  const q = (i: number, j: number) => station.covariance[i * STATION_UNKNOWNS + j];
  const lever = radius * combinedFactor;
  // The variance across the ray turns with it: the largest eigenvalue over rays 5° apart.
  let worst = 0;
  for (const { sine, cosine } of RAYS) {
    const [east, north] = [lever * cosine, -lever * sine];
    const ee = q(0, 0) + east * east * q(3, 3) + 2 * east * q(0, 3);
    const nn = q(1, 1) + north * north * q(3, 3) + 2 * north * q(1, 3);
    const en = q(0, 1) + east * north * q(3, 3) + east * q(1, 3) + north * q(0, 3);
    const spread = Math.sqrt(((ee - nn) / 2) ** 2 + en * en);
    worst = Math.max(worst, (ee + nn) / 2 + spread);
  }
  const bend = -(radius * radius) / (2 * earthRadius);
  const vertical = q(2, 2) + (radius * zenithSigma) ** 2 + bend * bend * q(4, 4) + 2 * bend * q(2, 4);
  return { horizontal: NORMAL_95 * Math.sqrt(worst), vertical: NORMAL_95 * Math.sqrt(vertical) };
}
