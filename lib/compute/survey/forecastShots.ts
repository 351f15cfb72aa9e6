import { wrapTurn } from '@/lib/compute/units/angles';
import type { ReadingKind } from './faces';
import { rayTo } from './ray';
import type { ControlMark, Face, Shot } from './shots';
import type { Surroundings } from './surroundings';

/** How a setup is meant to be shot. */
export interface ShootingPlan {
  faces: readonly Face[];
  sets: number;
  /** What is read of each target. */
  kinds: readonly ReadingKind[];
  /** Reflectors above their marks, m. */
  targetHeight: number;
}

/** A place of the tilting axis, m. */
export interface AxisPlace {
  easting: number;
  northing: number;
  axis: number;
}

/**
 * What an instrument without any error would read at a place, its circle's zero towards grid north, from marks that
 * stand where they are published. A mark without an elevation is taken to have its reflector at the axis' height.
 */
export function errorlessShots(
  place: AxisPlace,
  targets: readonly ControlMark[],
  { faces, sets, kinds, targetHeight }: ShootingPlan,
  surroundings: Surroundings,
): Shot[] {
  const reads = (kind: ReadingKind) => kinds.includes(kind);
  return targets.flatMap((mark) => {
    const rise = mark.elevation === null ? 0 : mark.elevation + targetHeight - place.axis;
    const [east, north] = [mark.easting - place.easting, mark.northing - place.northing];
    const ray = rayTo(east, north, rise, surroundings.refraction, surroundings);
    const distance = {
      slopeDistance: ray.slope,
      prismConstantMm: 0,
      prismConstantAppliedMm: 0,
      appliedPpm: 0,
    };
    return Array.from({ length: sets }, (_, set) =>
      faces.map(
        (face): Shot => ({
          id: `${mark.name}/${set + 1}/${face}`,
          target: mark.name,
          purpose: 'orient',
          face,
          set: set + 1,
          direction: reads('direction') ? wrapTurn(ray.azimuth + (face === 'left' ? 0 : Math.PI)) : null,
          zenith: reads('zenith') ? (face === 'left' ? ray.zenith : 2 * Math.PI - ray.zenith) : null,
          distance: reads('distance') ? distance : null,
          targetHeight,
          targetCentringSigma: null,
          targetHeightSigma: null,
        }),
      ),
    ).flat();
  });
}
