import { wrapDifference } from '@/lib/compute/units/angles';
import type { ReadingKind } from './faces';
import type { Place } from './networkUnknowns';
import { rayTo } from './ray';
import type { Surroundings } from './surroundings';

/**
 * What a reading of a setup depends on, in this order. Centring errors turn with the setup, so that turning the whole
 * network changes no reading: of the instrument along and across the zero of its circle, of the reflector along and
 * across the ray.
 */
export const RAY = {
  targetEasting: 0,
  targetNorthing: 1,
  targetElevation: 2,
  easting: 3,
  northing: 4,
  axis: 5,
  instrumentHeight: 6,
  instrumentAlong: 7,
  instrumentAcross: 8,
  orientation: 9,
  targetAlong: 10,
  targetAcross: 11,
  targetHeight: 12,
  refraction: 13,
  own: 14,
} as const;
export const RAY_PLACES = 15;

export interface RayReading {
  kind: ReadingKind;
  value: number;
  /** Places in the order of `RAY`. */
  places: readonly Place[];
  /** Added to target minus axis: target height minus instrument height, m. */
  rise: number;
  /** Face over sine of the zenith angle (directions) or face (zenith angles); 1 for the scale of a distance. */
  ownFactor: number;
}

/**
 * Observed minus computed of one reading, its derivatives by all of `RAY` written into `partials`.
 *
 * @param value the value of a place
 */
export function lineariseRay(
  reading: RayReading,
  value: (place: Place) => number,
  surroundings: Surroundings,
  partials: Float64Array,
): number {
  const { places, kind } = reading;
  const at = (index: number) => value(places[index]);
  const along = at(RAY.instrumentAlong);
  const across = at(RAY.instrumentAcross);
  const orientation = at(RAY.orientation);
  const [sine, cosine] = [Math.sin(orientation), Math.cos(orientation)];
  const offEast = along * sine + across * cosine;
  const offNorth = along * cosine - across * sine;
  const east = at(RAY.targetEasting) - at(RAY.easting) - offEast;
  const north = at(RAY.targetNorthing) - at(RAY.northing) - offNorth;
  const straight = Math.sqrt(east * east + north * north);
  const g = straight + at(RAY.targetAlong);
  const t = at(RAY.targetAcross);
  const grid = Math.sqrt(g * g + t * t);

  let computed: number;
  /** ∂f per metre along the ray and across it, of the reflector. */
  let perAlong: number;
  let perAcross: number;
  /** ∂f per metre of easting and northing of the reflector. */
  let perEast: number;
  let perNorth: number;
  partials.fill(0);
  if (kind === 'direction') {
    computed = Math.atan2(east, north) + Math.atan2(t, g) - orientation + reading.ownFactor * at(RAY.own);
    perAlong = -t / (grid * grid);
    perAcross = g / (grid * grid);
    perEast = north / (straight * straight) + (perAlong * east) / straight;
    perNorth = -east / (straight * straight) + (perAlong * north) / straight;
    partials[RAY.orientation] = -1;
    partials[RAY.own] = reading.ownFactor;
  } else {
    const height =
      at(RAY.targetElevation) + at(RAY.targetHeight) - at(RAY.axis) - at(RAY.instrumentHeight) + reading.rise;
    const ray = rayTo(0, grid, height, at(RAY.refraction), surroundings);
    const factor = kind === 'distance' ? 1 + at(RAY.own) : 1;
    const perGrid = factor * (kind === 'distance' ? ray.slopeGrid : ray.zenithGrid);
    const perHeight = factor * (kind === 'distance' ? ray.slopeHeight : ray.zenithHeight);
    computed = kind === 'distance' ? ray.slope * factor : ray.zenith + reading.ownFactor * at(RAY.own);
    perAlong = (perGrid * g) / grid;
    perAcross = (perGrid * t) / grid;
    perEast = (perAlong * east) / straight;
    perNorth = (perAlong * north) / straight;
    partials[RAY.targetElevation] = perHeight;
    partials[RAY.targetHeight] = perHeight;
    partials[RAY.axis] = -perHeight;
    partials[RAY.instrumentHeight] = -perHeight;
    partials[RAY.refraction] = kind === 'zenith' ? ray.zenithRefraction : 0;
    partials[RAY.own] = kind === 'distance' ? ray.slope : reading.ownFactor;
  }
  partials[RAY.targetEasting] = perEast;
  partials[RAY.targetNorthing] = perNorth;
  partials[RAY.easting] = -perEast;
  partials[RAY.northing] = -perNorth;
  partials[RAY.targetAlong] = perAlong;
  partials[RAY.targetAcross] = perAcross;
  partials[RAY.instrumentAlong] = -perEast * sine - perNorth * cosine;
  partials[RAY.instrumentAcross] = -perEast * cosine + perNorth * sine;
  partials[RAY.orientation] -= perEast * offNorth - perNorth * offEast;
  return kind === 'distance' ? reading.value - computed : wrapDifference(reading.value - computed);
}
