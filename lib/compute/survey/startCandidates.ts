import { wrapDifference } from '@/lib/compute/units/angles';
import { angleCircle, type Circle, meetings, otherMeeting, type Place } from './loci';
import type { Sight } from './sights';

/** A place where the station may be, with the orientation that fits its directions best; null without directions. */
export interface Candidate extends Place {
  orientation: number | null;
  /** Of all sights together, without unit: what one wrong mark adds is bounded. */
  misfit: number;
}

/** A sight that misses by this much counts half as wrong, m: well beyond what is measured, well below a blunder. */
const MISS = 0.1;
/** Marks that candidates are made of; with more, those spread evenly through the list. */
const MOST_MARKS = 8;
/** Of more marks, so many vote, spread evenly through the list. */
const MOST_VOTERS = 40;
/** Circles through marks meet in marks as well; nobody sights the mark that he stands on, m. */
export const ON_MARK = 0.1;

/**
 * Every station that two or three of the marks lead to, best first: pairs of marks with direction and distance, and
 * the meetings of distance circles with each other, with circles of inscribed angles, and of those in threes. As each
 * stands on few marks, some are free of whatever is wrong with one of them, and all marks vote on each, with one
 * sight apiece (consensus of minimal sets, all of them tried; Fischler and Bolles 1981).
 */
export function startCandidates(sights: readonly Sight[]): Candidate[] {
  const ofMarks = distinct(sights);
  const chosen = thinned(ofMarks, MOST_MARKS);
  const voters = thinned(ofMarks, MOST_VOTERS);
  const whole = chosen.filter(isWhole);
  const places: Place[] = pairs(whole).flatMap(([one, other]) => rigidMotion([one, other]) ?? []);
  if (whole.length < chosen.length || whole.length < 2) places.push(...meetingPlaces(chosen));
  return places
    .filter((place) => chosen.every(({ mark }) => !(distanceTo(mark, place) < ON_MARK)))
    .filter(({ easting, northing }) => Number.isFinite(easting) && Number.isFinite(northing))
    .map((place) => weighed(place, voters))
    .sort((a, b) => a.misfit - b.misfit);
}

/**
 * The station and orientation that lay the polar picture of two or more whole sights onto their marks (closed form,
 * two-dimensional case of Umeyama 1991). Null where all marks stand at one place.
 */
export function rigidMotion(
  sights: readonly (Sight & { direction: number; grid: number })[],
): (Place & { orientation: number }) | null {
  const seen = sights.map(({ grid, direction }) => ({
    east: grid * Math.sin(direction),
    north: grid * Math.cos(direction),
  }));
  const centre = { east: mean(seen.map((s) => s.east)), north: mean(seen.map((s) => s.north)) };
  const target = {
    east: mean(sights.map(({ mark }) => mark.easting)),
    north: mean(sights.map(({ mark }) => mark.northing)),
  };
  let sine = 0;
  let cosine = 0;
  sights.forEach(({ mark }, i) => {
    const [pe, pn] = [seen[i].east - centre.east, seen[i].north - centre.north];
    const [qe, qn] = [mark.easting - target.east, mark.northing - target.north];
    sine += qe * pn - qn * pe;
    cosine += qe * pe + qn * pn;
  });
  if (sine === 0 && cosine === 0) return null;
  const orientation = Math.atan2(sine, cosine);
  const [s, c] = [Math.sin(orientation), Math.cos(orientation)];
  return {
    easting: target.east - (c * centre.east + s * centre.north),
    northing: target.north - (c * centre.north - s * centre.east),
    orientation,
  };
}

export function isWhole(sight: Sight): sight is Sight & { direction: number; grid: number } {
  return sight.direction !== null && sight.grid !== null;
}

/** All that loci of distances and of angles meet in; two distances meet in two places, and so may others. */
function meetingPlaces(sights: readonly Sight[]): Place[] {
  const ranged = sights.filter(({ grid }) => grid !== null);
  const directed = sights.filter(({ direction }) => direction !== null);
  const ring = ({ mark, grid }: Sight): Circle => ({
    easting: mark.easting,
    northing: mark.northing,
    radius: grid!,
  });
  const arc = (left: Sight, right: Sight) =>
    angleCircle(left.mark, right.mark, right.direction! - left.direction!);
  const arcs = pairs(directed).map(([left, right]) => arc(left, right));
  return [
    ...pairs(ranged).flatMap(([one, other]) => meetings(ring(one), ring(other))),
    ...ranged.flatMap((sight) => arcs.flatMap((circle) => meetings(ring(sight), circle))),
    ...triples(directed).flatMap(
      ([one, two, three]) => otherMeeting(arc(one, two), arc(two, three), two.mark) ?? [],
    ),
  ];
}

/** How well all sights agree with a place, in the orientation that most of them vote for. */
export function weighed(place: Place, sights: readonly Sight[]): Candidate {
  const votes: { turn: number; distance: number }[] = [];
  let misfit = 0;
  for (const { mark, direction, grid } of sights) {
    const [east, north] = [mark.easting - place.easting, mark.northing - place.northing];
    const distance = Math.hypot(east, north);
    if (grid !== null) misfit += loss(grid - distance);
    if (direction !== null) votes.push({ turn: Math.atan2(east, north) - direction, distance });
  }
  let best: { turn: number; loss: number } | null = null;
  for (const { turn } of votes) {
    let sum = 0;
    for (const vote of votes) sum += loss(wrapDifference(vote.turn - turn) * vote.distance);
    if (best === null || sum < best.loss) best = { turn, loss: sum };
  }
  const { easting, northing } = place;
  return { easting, northing, orientation: best?.turn ?? null, misfit: misfit + (best?.loss ?? 0) };
}

/** Grows with the logarithm of a miss (Lorentzian): one that is grossly wrong does not outvote the others. */
function loss(miss: number): number {
  const ratio = miss / MISS;
  return Math.log1p(ratio * ratio);
}

/** One sight of each mark, the one with most in it. */
function distinct(sights: readonly Sight[]): Sight[] {
  const byMark = new Map<string, Sight>();
  const worth = ({ direction, grid }: Sight) => Number(direction !== null) + Number(grid !== null);
  for (const sight of sights) {
    const known = byMark.get(sight.mark.name);
    if (!known || worth(sight) > worth(known)) byMark.set(sight.mark.name, sight);
  }
  return [...byMark.values()];
}

function distanceTo(one: Place, other: Place): number {
  return Math.hypot(one.easting - other.easting, one.northing - other.northing);
}

function thinned<T>(list: readonly T[], most: number): T[] {
  if (list.length <= most) return [...list];
  return Array.from({ length: most }, (_, i) => list[Math.floor((i * list.length) / most)]);
}

function pairs<T>(list: readonly T[]): [T, T][] {
  return list.flatMap((one, i) => list.slice(i + 1).map((other): [T, T] => [one, other]));
}

function triples<T>(list: readonly T[]): [T, T, T][] {
  return list.flatMap((one, i) =>
    pairs(list.slice(i + 1)).map(([two, three]): [T, T, T] => [one, two, three]),
  );
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
