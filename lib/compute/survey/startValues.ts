import { wrapDifference } from '@/lib/compute/units/angles';
import type { Place } from './loci';
import { median, type Sight } from './sights';
import { type Candidate, isWhole, rigidMotion, startCandidates, weighed } from './startCandidates';
import type { Surroundings } from './surroundings';

export interface StartValues {
  easting: number;
  northing: number;
  /** Of the tilting axis. */
  elevation: number;
  orientation: number;
}

/** What the marks may miss the first picture by before single marks are doubted, m. */
const AGREED = 0.5;
/** Candidates nearer to each other than this come of the same solution, m. */
const SAME_PLACE = 0.05;
/** Candidates that all sights vote for so much less are no solutions: what the misses of a weak figure may cost. */
const AS_GOOD = 10;
/** Other solutions that are followed: two loci meet twice. */
const MOST_OTHERS = 5;

/**
 * Start values of a station for any orientation, best first; more than one where the sights may fit more than one
 * place. Empty where they fit none.
 */
export function startValues(sights: readonly Sight[], surroundings: Surroundings): StartValues[] {
  const whole = sights.filter(isWhole);
  // Two whole sights fit one place only.
  const unique = new Set(whole.map(({ mark }) => mark.name)).size > 1;
  if (unique) {
    const all = rigidMotion(whole);
    if (all && agrees(all, sights)) return [completed(all, sights, surroundings)];
  }
  const candidates = startCandidates(sights);
  const most = unique ? 1 : 1 + MOST_OTHERS;
  const apart: Candidate[] = [];
  for (const candidate of candidates) {
    if (candidate.misfit > candidates[0].misfit + AS_GOOD || apart.length === most) break;
    if (apart.every((other) => between(candidate, other) > SAME_PLACE)) apart.push(candidate);
  }
  return apart.map((candidate) => completed(candidate, sights, surroundings));
}

/** Start values of a station whose place is known: its orientation by the votes of its sights. */
export function occupiedStart(
  place: Place & { axis: number | null },
  sights: readonly Sight[],
  surroundings: Surroundings,
): StartValues {
  const start = completed(weighed(place, sights), sights, surroundings);
  return { ...start, elevation: place.axis ?? start.elevation };
}

function agrees(station: Place & { orientation: number }, sights: readonly Sight[]): boolean {
  return sights.every(({ mark, direction, grid }) => {
    const [east, north] = [mark.easting - station.easting, mark.northing - station.northing];
    const distance = Math.hypot(east, north);
    const turn = direction === null ? 0 : Math.atan2(east, north) - station.orientation - direction;
    return Math.hypot(wrapDifference(turn) * distance, (grid ?? distance) - distance) < AGREED;
  });
}

/** With the elevation of the axis: by zenith angle and distance, or else by zenith angle and the marks' distances. */
function completed(
  { easting, northing, orientation }: Place & { orientation: number | null },
  sights: readonly Sight[],
  { refraction, earthRadius, combinedFactor }: Surroundings,
): StartValues {
  const measured = sights.flatMap(({ axis }) => axis ?? []);
  const fromMap = () =>
    sights.flatMap(({ mark, zenith, reflector }) => {
      if (zenith === null || reflector === null) return [];
      const ground = between(mark, { easting, northing }) / combinedFactor;
      const bend = ground / (2 * earthRadius);
      return reflector - (ground / Math.tan(zenith + refraction * bend) + ground * bend);
    });
  return {
    easting,
    northing,
    elevation: median(measured.length > 0 ? measured : fromMap()) ?? 0,
    orientation: orientation ?? 0,
  };
}

function between(one: Place, other: Place): number {
  return Math.hypot(one.easting - other.easting, one.northing - other.northing);
}
