import { type MeanReading, meanOf, type Reading } from './faces';
import type { InstrumentAccuracy } from './instrument';
import { type Offset, offsetFromHeight, offsetFromZenith } from './ray';
import type { ControlMark } from './shots';
import { type AdjustedStation, type Occupied, occupiedAxis } from './stationAdjustment';
import type { OccupiedAxis } from './stationModel';
import type { Surroundings } from './surroundings';

/** A length as measured against what the published coordinates of both ends make of it, m. */
export interface Comparison {
  measured: number;
  published: number;
  /** Measured minus published. */
  difference: number;
  /** u of the difference, one standard deviation. */
  uncertainty: number;
}

/** What a backsight says of itself: whether it is the mark that it is taken for, and stands where it was published. */
export interface BacksightCheck {
  target: string;
  /** Grid distance; null where none was read. */
  distance: Comparison | null;
  /** Mark above occupied mark; null without zenith angle or without elevations. */
  height: Comparison | null;
}

/**
 * Distance and difference of heights to each backsight against published coordinates, before any adjustment. A mark
 * that moved sideways shows in neither.
 */
export function backsightChecks({ input, erections, readings }: AdjustedStation): BacksightCheck[] {
  const { occupied, control } = input;
  if (!occupied) return [];
  return erections.map((erection, index): BacksightCheck => {
    const mark = control.get(erection.target)!;
    const own = readings.filter((reading) => reading.erection === index);
    const sight = { mark, ...erection, own };
    return {
      target: mark.name,
      distance: distanceOf(sight, occupied, input),
      height: heightOf(sight, occupied, input),
    };
  });
}

interface Sight {
  mark: ControlMark;
  targetHeight: number;
  centringSigma: number;
  heightSigma: number;
  own: readonly Reading[];
}

interface Given {
  accuracy: InstrumentAccuracy;
  surroundings: Surroundings;
  ppm: number | null;
}

function distanceOf(sight: Sight, occupied: Occupied, given: Given): Comparison | null {
  const { mark, own } = sight;
  const distance = meanOf(own, 'distance');
  const offset = distance && offsetOf(sight, distance, occupied, given);
  if (!distance || !offset) return null;
  const { accuracy } = given;
  const axis = occupiedAxis(occupied, accuracy);
  const published = Math.hypot(mark.easting - occupied.mark.easting, mark.northing - occupied.mark.northing);
  const zenith = meanOf(own, 'zenith');
  return {
    measured: offset.grid,
    published,
    difference: offset.grid - published,
    uncertainty: Math.hypot(
      placeSigma(sight, axis),
      // On a slope the zenith angle counts as well, or else the heights of both ends: ∂√(s² − h²) = (s ∂s − h ∂h)/√(s² − h²).
      ...(zenith
        ? [slopeSigma(distance, given), offset.height * zenithSigma(zenith, accuracy)]
        : [
            (distance.value / offset.grid) * slopeSigma(distance, given),
            (offset.height / offset.grid) * heightSigma(sight, axis),
          ]),
    ),
  };
}

function heightOf(sight: Sight, occupied: Occupied, given: Given): Comparison | null {
  const { mark, own, targetHeight } = sight;
  const zenith = meanOf(own, 'zenith');
  const axis = occupiedAxis(occupied, given.accuracy);
  if (!zenith || mark.elevation === null || occupied.mark.elevation === null) return null;
  const { accuracy, surroundings } = given;
  const distance = meanOf(own, 'distance');
  const grid = Math.hypot(mark.easting - occupied.mark.easting, mark.northing - occupied.mark.northing);
  const ground = grid / surroundings.combinedFactor;
  const bend = (ground * ground) / (2 * surroundings.earthRadius);
  const rise = distance
    ? offsetFromZenith(zenith.value, distance.value, surroundings.refraction, surroundings).height
    : ground / Math.tan(zenith.value + (surroundings.refraction * bend) / ground) + bend;
  const measured = occupied.instrumentHeight + rise - targetHeight;
  const published = mark.elevation - occupied.mark.elevation;
  return {
    measured,
    published,
    difference: measured - published,
    uncertainty: Math.hypot(
      heightSigma(sight, axis),
      bend * surroundings.refractionSigma,
      // By the measured distance, or else by that of the published places: ∂(g cot z) = cot z ∂g − g ∂z/sin² z.
      ...(distance
        ? [Math.cos(zenith.value) * slopeSigma(distance, given), ground * zenithSigma(zenith, accuracy)]
        : [
            placeSigma(sight, axis) / Math.tan(zenith.value),
            (ground / Math.sin(zenith.value) ** 2) * zenithSigma(zenith, accuracy),
          ]),
    ),
  };
}

/** By zenith angle, or else by the heights of both ends. */
function offsetOf(
  { mark, own, targetHeight }: Sight,
  distance: MeanReading,
  occupied: Occupied,
  { accuracy, surroundings }: Given,
): Offset | null {
  const zenith = meanOf(own, 'zenith');
  if (zenith) return offsetFromZenith(zenith.value, distance.value, surroundings.refraction, surroundings);
  const { axis } = occupiedAxis(occupied, accuracy);
  if (axis === null || mark.elevation === null) return null;
  return offsetFromHeight(mark.elevation + targetHeight - axis, distance.value, surroundings);
}

/** Of the distance between both ends as they were published, with the instrument and the target set up over them. */
function placeSigma({ mark, centringSigma }: Sight, axis: OccupiedAxis): number {
  return Math.hypot(axis.horizontalSigma, mark.horizontalSigma, centringSigma);
}

/** Of the difference of heights between both ends as they were published, axis and target above them. */
function heightSigma({ mark, heightSigma: target }: Sight, axis: OccupiedAxis): number {
  return Math.hypot(axis.verticalSigma, mark.verticalSigma, target);
}

function slopeSigma({ value, sigma }: MeanReading, { ppm, surroundings }: Given): number {
  return Math.hypot(sigma, ppm === null ? surroundings.unknownAtmospherePpm * 1e-6 * value : 0);
}

function zenithSigma({ sigma, single }: MeanReading, accuracy: InstrumentAccuracy): number {
  return Math.hypot(sigma, single ? accuracy.collimation : 0);
}
