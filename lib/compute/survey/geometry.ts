import { wrapTurn } from '@/lib/compute/units/angles';

export interface SightGeometry {
  /** 2π minus the largest gap between neighbouring sights, rad. */
  spread: number;
  /** The station lies within the figure of its marks: no gap reaches half a turn. */
  inside: boolean;
}

/** How the sights from a station lie around the horizon. */
export function sightGeometry(azimuths: readonly number[]): SightGeometry {
  const sorted = azimuths.map(wrapTurn).sort((a, b) => a - b);
  let largest = 2 * Math.PI;
  if (sorted.length > 1) {
    largest = 2 * Math.PI - sorted[sorted.length - 1] + sorted[0];
    for (let i = 1; i < sorted.length; i++) largest = Math.max(largest, sorted[i] - sorted[i - 1]);
  }
  return { spread: 2 * Math.PI - largest, inside: largest < Math.PI };
}
