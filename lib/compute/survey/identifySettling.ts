import { wrapTurn } from '@/lib/compute/units/angles';
import type { ControlIndex } from './identifyControl';
import type { Pose } from './identifyPose';
import type { Place } from './identifyReflectors';
import { REACH } from './identifySearch';
import { rayTo } from './ray';
import type { Surroundings } from './surroundings';

/** What a shot to a mark itself would read, the target height nothing. */
export interface Reading {
  /** Circle in face left, rad. */
  direction: number;
  /** Null where mark or instrument has no height. */
  zenith: number | null;
  slope: number | null;
  /** Grid distance, m. */
  grid: number;
}

/** A shot that tells assignments apart, with what it would read under each, the best one first. */
export interface DecidingShot {
  target: string;
  readings: Reading[];
  /** How far apart the readings have the mark, at least, m. */
  apart: number;
}

/**
 * The mark whose readings differ most between the best assignment and every other, as far from the instrument as the
 * shots reached. Trusted marks come first. It has to be shot by its name: that is what the others lack.
 */
export function decidingShot(
  index: ControlIndex,
  places: readonly Place[],
  best: Pose,
  others: readonly Pose[],
  surroundings: Surroundings,
): DecidingShot | null {
  if (others.length === 0) return null;
  const range = places.reduce((far, { east, north }) => Math.max(far, Math.hypot(east, north)), 0);
  let chosen: { mark: number; apart: number; trusted: boolean } | null = null;
  index.near(best.east, best.north, range, (mark) => {
    const own = seenFrom(index, mark, best);
    if (!(Math.hypot(own.east, own.north) <= range)) return;
    const apart = others.reduce((least, pose) => {
      const other = seenFrom(index, mark, pose);
      const up = own.up - other.up || 0;
      return Math.min(least, Math.hypot(own.east - other.east, own.north - other.north, up));
    }, Number.POSITIVE_INFINITY);
    const trusted = index.marks[mark].status === 'trusted';
    if (
      chosen === null ||
      (trusted && !chosen.trusted) ||
      (trusted === chosen.trusted && apart > chosen.apart)
    ) {
      chosen = { mark, apart, trusted };
    }
  });
  if (chosen === null) return null;
  const { mark, apart } = chosen as { mark: number; apart: number };
  // The same stand with other names: no reading tells them apart.
  const coarsest = places.reduce((worst, { along, across }) => Math.max(worst, along, across), 0);
  if (apart <= REACH * coarsest) return null;
  return {
    target: index.marks[mark].name,
    apart,
    readings: [best, ...others].map((pose) => reading(index, mark, pose, surroundings)),
  };
}

/** A mark in the frame of an instrument. */
function seenFrom(index: ControlIndex, mark: number, pose: Pose) {
  const [east, north] = [index.east[mark] - pose.east, index.north[mark] - pose.north];
  const [sine, cosine] = [Math.sin(pose.orientation), Math.cos(pose.orientation)];
  return {
    east: cosine * east - sine * north,
    north: cosine * north + sine * east,
    up: index.up[mark] - pose.up,
  };
}

function reading(index: ControlIndex, mark: number, pose: Pose, surroundings: Surroundings): Reading {
  const [east, north] = [index.east[mark] - pose.east, index.north[mark] - pose.north];
  const up = index.up[mark] - pose.up;
  const known = !Number.isNaN(up);
  const ray = rayTo(east, north, known ? up : 0, surroundings.refraction, surroundings);
  return {
    direction: wrapTurn(ray.azimuth - pose.orientation),
    zenith: known ? ray.zenith : null,
    slope: known ? ray.slope : null,
    grid: ray.grid,
  };
}
