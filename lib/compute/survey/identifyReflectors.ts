import { chiSquareQuantile } from '@/lib/compute/statistics/distributions';
import { wrapDifference } from '@/lib/compute/units/angles';
import { type Erection, meanFaces, meanOf, type Reading } from './faces';
import type { InstrumentAccuracy } from './instrument';
import { offsetFromZenith } from './ray';
import type { Shot } from './shots';
import type { Surroundings } from './surroundings';

/** A pointing to a reflector that nobody named. */
export type UnnamedShot = Omit<Shot, 'target'>;

/** How shots are brought to places: what is stated of the instrument, the ground and the air. */
export interface Sighting {
  accuracy: InstrumentAccuracy;
  surroundings: Surroundings;
  /** Atmospheric correction wanted, ppm; null where the atmosphere is unknown. */
  ppm: number | null;
}

/**
 * The place under a reflector in the instrument's own frame: levelled, its north the circle's zero, its origin the
 * tilting axis. Grid metres in plan, metres in height, the target height taken off.
 */
export interface Place {
  east: number;
  north: number;
  up: number;
  /** Circle reading, rad. */
  direction: number;
  /** One standard deviation each, along the sight, across it and in height, m; the control's own is not in it. */
  along: number;
  across: number;
  vertical: number;
}

export interface Reflector extends Place {
  /** Ids of its shots: faces, sets, target heights together. */
  shots: string[];
}

/** Shots farther apart than this (χ² of three) are not one mark. */
const SAME_MARK = chiSquareQuantile(1 - 1e-9, 3);

/**
 * The marks behind unnamed shots. Shots to one place are one mark, whatever their face, set and target height; a shot
 * without distance belongs to the mark on its line.
 *
 * @returns the reflectors, and the ids of shots that belong to none because a reading lacks
 */
export function reflectorsOf(
  shots: readonly UnnamedShot[],
  sighting: Sighting,
): { reflectors: Reflector[]; incomplete: string[] } {
  const placed = shots.map((shot) => {
    const named = { ...shot, target: '' };
    return { shot, sight: sightOf(shot), place: placesOf([named], sighting)[0] ?? null };
  });
  const groups: (typeof placed)[] = [];
  for (const one of placed) {
    if (one.place === null) continue;
    const near = groups.filter((group) => group.some((other) => isSame(one.place!, other.place!)));
    const merged = [...near.flat(), one];
    for (const group of near) groups.splice(groups.indexOf(group), 1);
    groups.push(merged);
  }
  const incomplete: string[] = [];
  for (const one of placed) {
    if (one.place !== null) continue;
    const { sight, shot } = one;
    const near = groups.filter((group) =>
      group.some((other) => sight && isOnLine(sight, other, shot.targetHeight, sighting.accuracy)),
    );
    if (near.length === 1) near[0].push(one);
    else incomplete.push(shot.id);
  }
  const reflectors = groups.map((group): Reflector => {
    const ids = new Set(group.map(({ shot }) => shot.id));
    const own = shots.filter(({ id }) => ids.has(id));
    const places = placesOf(
      own.map((shot) => ({ ...shot, target: '' })),
      sighting,
    );
    return { ...meanPlace(places), shots: own.map(({ id }) => id) };
  });
  return { reflectors, incomplete };
}

/** Places of shots to one mark, one a reflector as it stood; a reflector without all three readings gives none. */
export function placesOf(shots: readonly Shot[], sighting: Sighting): Place[] {
  const { erections, readings } = meanFaces(shots, sighting.accuracy, sighting.ppm);
  return erections.flatMap((erection, index) => {
    const own = readings.filter((reading) => reading.erection === index);
    return placeOf(erection, own, sighting) ?? [];
  });
}

function placeOf(erection: Erection, readings: readonly Reading[], sighting: Sighting): Place | null {
  const { accuracy, surroundings, ppm } = sighting;
  const direction = meanOf(readings, 'direction');
  const zenith = meanOf(readings, 'zenith');
  const distance = meanOf(readings, 'distance');
  if (!direction || !zenith || !distance) return null;
  const { grid, height } = offsetFromZenith(
    zenith.value,
    distance.value,
    surroundings.refraction,
    surroundings,
  );
  const [sine, cosine] = [Math.sin(zenith.value), Math.cos(zenith.value)];
  const directionSigma = Math.hypot(direction.sigma, direction.single ? accuracy.collimation / sine : 0);
  const zenithSigma = Math.hypot(zenith.sigma, zenith.single ? accuracy.collimation : 0);
  const airSigma = ppm === null ? surroundings.unknownAtmospherePpm * 1e-6 * distance.value : 0;
  const distanceSigma = Math.hypot(distance.sigma, airSigma);
  const bend = (grid * grid * surroundings.refractionSigma) / (2 * surroundings.earthRadius);
  return {
    east: grid * Math.sin(direction.value),
    north: grid * Math.cos(direction.value),
    up: height - erection.targetHeight,
    direction: direction.value,
    along: Math.hypot(distanceSigma * sine, distance.value * cosine * zenithSigma, erection.centringSigma),
    across: Math.hypot(grid * directionSigma, erection.centringSigma),
    vertical: Math.hypot(
      distance.value * sine * zenithSigma,
      distanceSigma * cosine,
      bend,
      erection.heightSigma,
    ),
  };
}

/** Weighted by their variances; reflectors of different heights on one mark are independent. */
function meanPlace(places: readonly Place[]): Place {
  if (places.length === 1) return places[0];
  const sum = { weight: 0, up: 0, upWeight: 0, east: 0, north: 0, along: 0, across: 0 };
  for (const place of places) {
    const weight = 1 / (place.along ** 2 + place.across ** 2);
    const upWeight = 1 / place.vertical ** 2;
    sum.weight += weight;
    sum.east += weight * place.east;
    sum.north += weight * place.north;
    sum.upWeight += upWeight;
    sum.up += upWeight * place.up;
    sum.along += 1 / place.along ** 2;
    sum.across += 1 / place.across ** 2;
  }
  return {
    east: sum.east / sum.weight,
    north: sum.north / sum.weight,
    up: sum.up / sum.upWeight,
    direction: places[0].direction,
    along: 1 / Math.sqrt(sum.along),
    across: 1 / Math.sqrt(sum.across),
    vertical: 1 / Math.sqrt(sum.upWeight),
  };
}

function isSame(one: Place, other: Place): boolean {
  const [east, north, up] = [one.east - other.east, one.north - other.north, one.up - other.up];
  const [sine, cosine] = [Math.sin(one.direction), Math.cos(one.direction)];
  const along = (east * sine + north * cosine) / Math.hypot(one.along, other.along);
  const across = (east * cosine - north * sine) / Math.hypot(one.across, other.across);
  const vertical = up / Math.hypot(one.vertical, other.vertical);
  return along ** 2 + across ** 2 + vertical ** 2 <= SAME_MARK;
}

/** Direction and zenith angle as face left reads them; null where one lacks. */
interface Sight {
  direction: number;
  zenith: number;
}

function sightOf({ face, direction, zenith }: UnnamedShot): Sight | null {
  if (direction === null || zenith === null) return null;
  return face === 'left'
    ? { direction, zenith }
    : { direction: direction - Math.PI, zenith: 2 * Math.PI - zenith };
}

/** Whether a sight without distance goes to the same reflector as a complete shot. */
function isOnLine(
  sight: Sight,
  other: { shot: UnnamedShot; sight: Sight | null },
  targetHeight: number,
  accuracy: InstrumentAccuracy,
): boolean {
  if (!other.sight || other.shot.targetHeight !== targetHeight) return false;
  const sine = Math.sin(sight.zenith);
  const across = wrapDifference(sight.direction - other.sight.direction) * sine;
  const upwards = sight.zenith - other.sight.zenith;
  // Two single readings, each with its collimation or index.
  const sigma = (stated: number) => Math.hypot(2 * stated, Math.SQRT2 * accuracy.collimation);
  return (across / sigma(accuracy.direction)) ** 2 + (upwards / sigma(accuracy.zenith)) ** 2 <= SAME_MARK;
}
