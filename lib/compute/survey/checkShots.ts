import { meanFaces, meanOf } from './faces';
import type { InstrumentAccuracy } from './instrument';
import { polarCovariance, polarJacobian, polarPoint, STATION_UNKNOWNS, type Station } from './polarPoint';
import type { ControlMark, Shot } from './shots';
import type { Surroundings } from './surroundings';

export interface Tolerance {
  horizontal: number;
  vertical: number;
}

/**
 * `agreed`: within the tolerance and within 2u, and 2u itself within the tolerance. `over`: beyond the tolerance.
 * `disagrees`: within the tolerance, but more than the uncertainty explains. `notCapable`: 2u exceeds the
 * tolerance, so the check could not have told.
 */
export type CheckOutcome = 'agreed' | 'over' | 'disagrees' | 'notCapable';

export interface CheckDifference {
  target: string;
  version: number;
  /** The mark took part in the fit: the check shows drift, not independence. */
  inFit: boolean;
  status: ControlMark['status'];
  published: Pick<ControlMark, 'easting' | 'northing' | 'elevation'>;
  /** Ids of its shots. */
  shots: string[];
  /** Polar position minus published control, m; null where it could not be formed. */
  difference: { easting: number; northing: number; elevation: number | null };
  /** u of the difference: worst direction in the horizontal, and vertical. */
  uncertainty: { horizontal: number; vertical: number | null };
  horizontal: CheckOutcome;
  vertical: CheckOutcome | null;
}

/** A reflector that was shot later, with its mark as published. */
export interface LaterSight {
  mark: ControlMark;
  targetHeight: number;
  /** Ids of its shots. */
  shots: string[];
  reading: { direction: number; zenith: number; distance: number };
  /** Of the readings' means and of the reflector as it stood; what single faces leave in is not among them. */
  sigmas: { direction: number; zenith: number; distance: number; targetHeight: number; centring: number };
  /** Directions, zenith angles that were read in one face only keep the instrument's collimation and index. */
  singleFace: { direction: boolean; zenith: boolean };
}

export interface LaterShots {
  shots: readonly Shot[];
  control: ReadonlyMap<string, ControlMark>;
  accuracy: InstrumentAccuracy;
  ppm: number | null;
}

/** Shots from a setup that stands, meaned by the reflector as it stood; those that were not fully read say nothing. */
export function laterSights({ shots, control, accuracy, ppm }: LaterShots): LaterSight[] {
  const { erections, readings } = meanFaces(shots, accuracy, ppm);
  return erections.flatMap((erection, index): LaterSight[] => {
    const mark = control.get(erection.target);
    const own = readings.filter((reading) => reading.erection === index);
    const direction = meanOf(own, 'direction');
    const zenith = meanOf(own, 'zenith');
    const distance = meanOf(own, 'distance');
    if (!mark || !direction || !zenith || !distance) return [];
    const { targetHeight } = erection;
    return [
      {
        mark,
        targetHeight,
        shots: shots.flatMap((shot) =>
          shot.target === mark.name && shot.targetHeight === targetHeight ? shot.id : [],
        ),
        reading: { direction: direction.value, zenith: zenith.value, distance: distance.value },
        sigmas: {
          direction: direction.sigma,
          zenith: zenith.sigma,
          distance: distance.sigma,
          targetHeight: erection.heightSigma,
          centring: erection.centringSigma,
        },
        singleFace: { direction: direction.single, zenith: zenith.single },
      },
    ];
  });
}

/** A fitted setup, as later shots are compared with it. */
export interface FittedSetup {
  station: Station;
  heightDetermined: boolean;
  /** Covariance (5 × 3) of the station with the published coordinates of marks of its fit. */
  crossCovariance: ReadonlyMap<string, ArrayLike<number>>;
  /** σ₀ that the station's covariance was multiplied by: it holds for the marks of the fit as well. */
  scale: number;
  surroundings: Surroundings;
}

/**
 * Differences of check shots against published control, with the uncertainty of setup, shot and mark combined.
 * A mark that was in the fit is correlated with the station; that correlation is in u.
 */
export function checkDifferences(
  input: LaterShots & FittedSetup & { tolerance: Tolerance },
): CheckDifference[] {
  const { station, accuracy, surroundings, tolerance } = input;
  return laterSights(input).map(({ mark, targetHeight, shots, reading, sigmas, singleFace }) => {
    const point = polarPoint(station, { ...reading, targetHeight }, surroundings);
    const collimation = (single: boolean) => (single ? accuracy.collimation : 0);
    const scale = input.ppm === null ? surroundings.unknownAtmospherePpm * 1e-6 * reading.distance : 0;
    const covariance = polarCovariance(
      station,
      reading,
      {
        ...sigmas,
        direction: Math.hypot(sigmas.direction, collimation(singleFace.direction) / Math.sin(reading.zenith)),
        zenith: Math.hypot(sigmas.zenith, collimation(singleFace.zenith)),
        distance: Math.hypot(sigmas.distance, scale),
      },
      surroundings,
    );
    const cross = input.crossCovariance.get(mark.name);
    if (cross) addMark(covariance, mark, input.scale, crossTerm(station, reading, cross, surroundings));
    else addMark(covariance, mark);

    const east = point.easting - mark.easting;
    const north = point.northing - mark.northing;
    const compared = input.heightDetermined ? mark.elevation : null;
    const up = compared === null ? null : point.elevation - compared;
    const worst =
      (covariance[0] + covariance[4]) / 2 + Math.hypot((covariance[0] - covariance[4]) / 2, covariance[1]);
    const uHorizontal = Math.sqrt(worst);
    const uVertical = up === null ? null : Math.sqrt(covariance[8]);
    return {
      target: mark.name,
      version: mark.version,
      inFit: cross !== undefined,
      status: mark.status,
      published: { easting: mark.easting, northing: mark.northing, elevation: mark.elevation },
      shots,
      difference: { easting: east, northing: north, elevation: up },
      uncertainty: { horizontal: uHorizontal, vertical: uVertical },
      horizontal: outcome(Math.hypot(east, north), uHorizontal, tolerance.horizontal),
      vertical: up === null || uVertical === null ? null : outcome(up, uVertical, tolerance.vertical),
    };
  });
}

/** Agreement of a difference with its uncertainty and a tolerance. */
export function outcome(difference: number, uncertainty: number, tolerance: number): CheckOutcome {
  if (Math.abs(difference) > tolerance) return 'over';
  if (2 * uncertainty > tolerance) return 'notCapable';
  return Math.abs(difference) <= 2 * uncertainty ? 'agreed' : 'disagrees';
}

/** Adds the mark's own variance and takes off twice its covariance with the polar point. */
function addMark(covariance: Float64Array, mark: ControlMark, scale = 1, cross?: Float64Array): void {
  const own = [mark.horizontalSigma, mark.horizontalSigma, mark.verticalSigma];
  for (let i = 0; i < 3; i++) {
    covariance[i * 3 + i] += (scale * own[i]) ** 2;
    for (let j = 0; cross && j < 3; j++) covariance[i * 3 + j] -= cross[i * 3 + j] + cross[j * 3 + i];
  }
}

/** Covariance (3 × 3) of the polar point with the published coordinates, J·C. */
function crossTerm(
  station: Station,
  reading: { direction: number; zenith: number; distance: number },
  cross: ArrayLike<number>,
  surroundings: Surroundings,
): Float64Array {
  const jacobian = polarJacobian(station, reading, surroundings).station;
  const result = new Float64Array(9);
  for (let i = 0; i < 3; i++) {
    for (let j = 0; j < 3; j++) {
      for (let k = 0; k < STATION_UNKNOWNS; k++) {
        result[i * 3 + j] += jacobian[i * STATION_UNKNOWNS + k] * cross[k * 3 + j];
      }
    }
  }
  return result;
}
