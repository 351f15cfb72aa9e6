import { type MeanReading, meanFaces, meanOf } from './faces';
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

/**
 * Differences of check shots against published control, with the uncertainty of setup, shot and mark combined.
 * A mark that was in the fit is correlated with the station; that correlation is in u.
 *
 * @param crossCovariance covariance (5 × 3) of the station with the published coordinates of marks of its fit
 * @param scale σ₀ that the station's covariance was multiplied by: it holds for the marks of the fit as well
 */
export function checkDifferences(input: {
  shots: readonly Shot[];
  control: ReadonlyMap<string, ControlMark>;
  station: Station;
  heightDetermined: boolean;
  crossCovariance: ReadonlyMap<string, ArrayLike<number>>;
  scale: number;
  accuracy: InstrumentAccuracy;
  surroundings: Surroundings;
  ppm: number | null;
  tolerance: Tolerance;
}): CheckDifference[] {
  const { control, station, accuracy, surroundings, tolerance } = input;
  const { erections, readings } = meanFaces(input.shots, accuracy, input.ppm);
  return erections.flatMap((erection, index): CheckDifference[] => {
    const mark = control.get(erection.target);
    const own = readings.filter((reading) => reading.erection === index);
    const direction = meanOf(own, 'direction');
    const zenith = meanOf(own, 'zenith');
    const distance = meanOf(own, 'distance');
    if (!mark || !direction || !zenith || !distance) return [];
    const reading = { direction: direction.value, zenith: zenith.value, distance: distance.value };
    const point = polarPoint(station, { ...reading, targetHeight: erection.targetHeight }, surroundings);
    const collimation = (mean: MeanReading) => (mean.single ? accuracy.collimation : 0);
    const scale = input.ppm === null ? surroundings.unknownAtmospherePpm * 1e-6 * distance.value : 0;
    const covariance = polarCovariance(
      station,
      reading,
      {
        direction: Math.hypot(direction.sigma, collimation(direction) / Math.sin(zenith.value)),
        zenith: Math.hypot(zenith.sigma, collimation(zenith)),
        distance: Math.hypot(distance.sigma, scale),
        targetHeight: erection.heightSigma,
        centring: erection.centringSigma,
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
    return [
      {
        target: mark.name,
        version: mark.version,
        inFit: cross !== undefined,
        status: mark.status,
        published: { easting: mark.easting, northing: mark.northing, elevation: mark.elevation },
        shots: input.shots.flatMap(({ id, target, targetHeight }) =>
          target === mark.name && targetHeight === erection.targetHeight ? id : [],
        ),
        difference: { easting: east, northing: north, elevation: up },
        uncertainty: { horizontal: uHorizontal, vertical: uVertical },
        horizontal: outcome(Math.hypot(east, north), uHorizontal, tolerance.horizontal),
        vertical: up === null || uVertical === null ? null : outcome(up, uVertical, tolerance.vertical),
      },
    ];
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
