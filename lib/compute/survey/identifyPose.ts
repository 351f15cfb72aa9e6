import type { AdjustmentModel } from '@/lib/compute/adjustment/model';
import { RowBuilder } from '@/lib/compute/adjustment/rows';
import { solve } from '@/lib/compute/adjustment/solve';
import type { ControlIndex } from './identifyControl';
import type { Place } from './identifyReflectors';

/** How an instrument stands: what brings places in its own frame to the grid. Levelled, so that it only turns and shifts. */
export interface Pose {
  east: number;
  north: number;
  /** Of the tilting axis; NaN where no mark with an elevation says. */
  up: number;
  orientation: number;
}

/** What is uncertain about a pose: variances at the middle of its marks, of the turn and of the height. */
export interface PoseSpread {
  centreEast: number;
  centreNorth: number;
  plan: number;
  turn: number;
  height: number;
}

export interface SpreadPose {
  pose: Pose;
  spread: PoseSpread;
}

/** No mark: a stray. */
export const STRAY = -1;

/** Where a pose has a place of the instrument's frame. */
export function placeAt(pose: Pose, { east, north, up }: { east: number; north: number; up: number }) {
  const [sine, cosine] = [Math.sin(pose.orientation), Math.cos(pose.orientation)];
  return {
    east: pose.east + cosine * east + sine * north,
    north: pose.north + cosine * north - sine * east,
    up: pose.up + up,
  };
}

/**
 * The pose that lays places onto their marks, in closed form with one weight a mark (the two-dimensional case of
 * Umeyama 1991); null where they stand at one place.
 *
 * @param marks mark of each place, STRAY for none
 */
export function roughPose(
  index: ControlIndex,
  places: readonly Place[],
  marks: ArrayLike<number>,
): SpreadPose | null {
  let weights = 0;
  let upWeights = 0;
  let up = 0;
  const [own, grid] = [
    { east: 0, north: 0 },
    { east: 0, north: 0 },
  ];
  for (let i = 0; i < places.length; i++) {
    const mark = marks[i];
    if (mark === STRAY) continue;
    const { east, north, along, across, vertical } = places[i];
    const weight = 1 / ((along * along + across * across) / 2 + index.horizontal[mark] ** 2);
    weights += weight;
    own.east += weight * east;
    own.north += weight * north;
    grid.east += weight * index.east[mark];
    grid.north += weight * index.north[mark];
    if (Number.isNaN(index.up[mark])) continue;
    const upWeight = 1 / (vertical * vertical + index.vertical[mark] ** 2);
    upWeights += upWeight;
    up += upWeight * (index.up[mark] - places[i].up);
  }
  own.east /= weights;
  own.north /= weights;
  grid.east /= weights;
  grid.north /= weights;
  let sine = 0;
  let cosine = 0;
  let moment = 0;
  for (let i = 0; i < places.length; i++) {
    const mark = marks[i];
    if (mark === STRAY) continue;
    const { along, across } = places[i];
    const weight = 1 / ((along * along + across * across) / 2 + index.horizontal[mark] ** 2);
    const [pe, pn] = [places[i].east - own.east, places[i].north - own.north];
    const [qe, qn] = [index.east[mark] - grid.east, index.north[mark] - grid.north];
    sine += weight * (qe * pn - qn * pe);
    cosine += weight * (qe * pe + qn * pn);
    moment += weight * (pe * pe + pn * pn);
  }
  if (!(moment > 0) || (sine === 0 && cosine === 0)) return null;
  const orientation = Math.atan2(sine, cosine);
  const [s, c] = [Math.sin(orientation), Math.cos(orientation)];
  return {
    pose: {
      east: grid.east - (c * own.east + s * own.north),
      north: grid.north - (c * own.north - s * own.east),
      up: upWeights > 0 ? up / upWeights : Number.NaN,
      orientation,
    },
    spread: {
      centreEast: grid.east,
      centreNorth: grid.north,
      plan: 1 / weights,
      turn: 1 / moment,
      height: upWeights > 0 ? 1 / upWeights : 0,
    },
  };
}

/**
 * Squared standardised misfit of a place and a mark under a pose: along the sight, across it and, where the mark has
 * an elevation and the pose a height, in height. What is uncertain about the pose is allowed for.
 */
export function misfit(
  index: ControlIndex,
  mark: number,
  place: Place,
  { pose, spread }: SpreadPose,
): number {
  const azimuth = pose.orientation + place.direction;
  const [sine, cosine] = [Math.sin(azimuth), Math.cos(azimuth)];
  const at = placeAt(pose, place);
  const east = index.east[mark] - at.east;
  const north = index.north[mark] - at.north;
  const up = index.up[mark] - at.up;
  const plan = index.horizontal[mark] ** 2 + planVariance(spread, at);
  const along = (east * sine + north * cosine) ** 2 / (place.along ** 2 + plan);
  const across = (east * cosine - north * sine) ** 2 / (place.across ** 2 + plan);
  if (Number.isNaN(up)) return along + across;
  return along + across + up ** 2 / (place.vertical ** 2 + index.vertical[mark] ** 2 + spread.height);
}

/** Variance that a pose brings to a place far from the middle of its marks. */
export function planVariance(spread: PoseSpread, at: { east: number; north: number }): number {
  const lever2 = (at.east - spread.centreEast) ** 2 + (at.north - spread.centreNorth) ** 2;
  return spread.plan + lever2 * spread.turn;
}

/**
 * The adjusted pose, each place weighted along its sight, across it and in height by what is stated of shot and mark.
 * A mark without elevation tells nothing of the height; where none has one, the height stays as it was.
 *
 * @returns the pose and vᵀPv
 */
export function adjustedPose(
  index: ControlIndex,
  places: readonly Place[],
  marks: ArrayLike<number>,
  start: Pose,
): { pose: Pose; weightedSquares: number } {
  const rows = new RowBuilder();
  const observed: { place: Place; mark: number; axis: 'along' | 'across' | 'vertical' }[] = [];
  places.forEach((place, i) => {
    const mark = marks[i];
    if (mark === STRAY) return;
    for (const axis of ['along', 'across', 'vertical'] as const) {
      if (axis === 'vertical' && Number.isNaN(index.up[mark])) continue;
      const own = axis === 'vertical' ? index.vertical[mark] : index.horizontal[mark];
      rows.add(axis === 'vertical' ? [2] : [0, 1, 3], Math.hypot(place[axis], own));
      observed.push({ place, mark, axis });
    }
  });
  const heightKnown = !Number.isNaN(start.up);
  if (!heightKnown) rows.add([2], 1);
  const structure = rows.build();
  const model: AdjustmentModel = {
    ...structure,
    unknowns: 4,
    shared: 4,
    blocks: Int32Array.of(4),
    // Unknowns are counted from the start: east, north, up, orientation.
    linearise(x, coefficients, misclosures) {
      const pose = moved(start, x);
      const [sine, cosine] = [Math.sin(pose.orientation), Math.cos(pose.orientation)];
      observed.forEach(({ place, mark, axis }, row) => {
        const first = structure.rowStart[row];
        if (axis === 'vertical') {
          coefficients[first] = 1;
          misclosures[row] = index.up[mark] - place.up - pose.up;
          return;
        }
        const azimuth = pose.orientation + place.direction;
        const [sightEast, sightNorth] = [Math.sin(azimuth), Math.cos(azimuth)];
        const [towardsEast, towardsNorth] =
          axis === 'along' ? [sightEast, sightNorth] : [sightNorth, -sightEast];
        const east = cosine * place.east + sine * place.north;
        const north = cosine * place.north - sine * place.east;
        coefficients[first] = towardsEast;
        coefficients[first + 1] = towardsNorth;
        coefficients[first + 2] = towardsEast * north - towardsNorth * east;
        misclosures[row] =
          towardsEast * (index.east[mark] - pose.east - east) +
          towardsNorth * (index.north[mark] - pose.north - north);
      });
      if (!heightKnown) {
        coefficients[structure.rowStart[observed.length]] = 1;
        misclosures[observed.length] = -x[2];
      }
    },
  };
  const { unknowns, weightedSquares } = solve(model, new Float64Array(4));
  const pose = moved(start, unknowns);
  return { pose: heightKnown ? pose : { ...pose, up: Number.NaN }, weightedSquares };
}

function moved({ east, north, up, orientation }: Pose, x: Float64Array): Pose {
  return { east: east + x[0], north: north + x[1], up: up + x[2], orientation: orientation + x[3] };
}
