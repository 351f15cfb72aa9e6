import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { type Ellipse, ellipseFactor95, standardEllipse } from '@/lib/compute/adjustment/ellipse';
import { type GlobalTest, globalTest } from '@/lib/compute/adjustment/globalTest';
import { type Reliability, reliability } from '@/lib/compute/adjustment/reliability';
import type { Solution } from '@/lib/compute/adjustment/solve';
import { wrapTurn } from '@/lib/compute/units/angles';
import { type Explanation, explain } from './explain';
import type { FaceErrors, ReadingKind } from './faces';
import { type SightGeometry, sightGeometry } from './geometry';
import { type MarkShift, shiftsWithout } from './leaveOneOut';
import { type Point, polarPoint, polarPointAtElevation, STATION_UNKNOWNS, type Station } from './polarPoint';
import type { ControlMark } from './shots';
import { type AdjustedStation, adjustStation, type StationInput } from './stationAdjustment';
import { AXIS, EASTING, NORTHING, ORIENTATION, REFRACTION, type StationModel } from './stationModel';
import type { Surroundings } from './surroundings';

export interface FittedReading {
  kind: ReadingKind;
  set: number;
  /** Both faces meaned, or one of them. */
  faces: 'both' | 'left' | 'right';
  /** Reduced observed minus fitted; rad or m. */
  residual: number;
  /** NaN where no other observation controls it. */
  standardised: number;
  redundancy: number;
  /** In the reading's unit; Infinity where not controlled. */
  minimalDetectable: number;
}

export interface FittedMark {
  name: string;
  version: number;
  status: ControlMark['status'];
  /** The coordinates that it was held at. */
  published: Pick<ControlMark, 'easting' | 'northing' | 'elevation'>;
  /** Ids of its shots. */
  shots: string[];
  /** Took part in easting and northing; in the height. */
  horizontal: boolean;
  vertical: boolean;
  /** Polar position from the fitted station minus published control; null where it was not fully read. */
  residual: { easting: number | null; northing: number | null; elevation: number | null };
  readings: FittedReading[];
  /** How the station moves without this mark; null where the others do not determine it. */
  without: MarkShift | null;
  /** Covariance of (station's five unknowns) with the error of the published coordinates, 5 × 3 row by row. */
  stationCovariance: Float64Array;
}

export interface StationFit {
  station: Station;
  heightDetermined: boolean;
  converged: boolean;
  iterations: number;
  test: GlobalTest;
  /** σ₀ where the global test failed high, else 1: already in the station's covariance. */
  scale: number;
  ellipse95: Ellipse;
  marks: FittedMark[];
  geometry: SightGeometry;
  faceErrors: FaceErrors | null;
  /** Heaviest first; weights sum to 1. */
  explanations: Explanation[];
}

/**
 * Free station from shots to known marks: directions, zenith angles and slope distances in one weighted
 * adjustment, with statistics and every mark left out in turn.
 *
 * @param shots orientation shots only, to marks of `control`
 * @param ppm atmospheric correction wanted, null where the atmosphere is unknown
 * @throws StationError where the shots do not determine a station
 */
export function fitStation(input: StationInput): StationFit {
  return describeStation(adjustStation(input));
}

/** Statistics of an adjusted station, with every mark left out in turn. */
export function describeStation(adjusted: AdjustedStation): StationFit {
  const { input, model, solution, erections, readings } = adjusted;
  const { control, surroundings } = input;
  const cofactors = new Cofactors(solution);
  const statistics = reliability(solution, cofactors);
  const test = globalTest(solution.weightedSquares, solution.degreesOfFreedom);
  const scale = test.passed ? 1 : test.sigma0;
  const station = fittedStation(model, solution, cofactors, scale);
  const axes = standardEllipse(station.covariance[0], station.covariance[6], station.covariance[1]);
  const factor = ellipseFactor95(test.passed ? null : test.degreesOfFreedom);
  const shifts = shiftsWithout(model, solution);

  const marks = model.marks.map((name, block): FittedMark => {
    const mark = control.get(name)!;
    const own = readings.flatMap((reading, row) => (erections[reading.erection].target === name ? row : []));
    const kinds = new Set(own.map((row) => readings[row].kind));
    return {
      name,
      version: mark.version,
      status: mark.status,
      published: { easting: mark.easting, northing: mark.northing, elevation: mark.elevation },
      shots: input.shots.flatMap((shot) => (shot.target === name ? shot.id : [])),
      horizontal: kinds.has('direction') || kinds.has('distance'),
      vertical: kinds.has('zenith') && mark.elevation !== null,
      residual: markResidual(mark, station, model, erections, surroundings),
      readings: own.map((row) => fittedReading(row, model, solution, statistics)),
      without: shifts[block],
      stationCovariance: stationCovariance(model, cofactors, mark, erections, scale),
    };
  });
  return {
    station,
    heightDetermined: model.heightDetermined,
    converged: solution.converged,
    iterations: solution.iterations,
    test,
    scale,
    ellipse95: {
      semiMajor: axes.semiMajor * factor,
      semiMinor: axes.semiMinor * factor,
      azimuth: axes.azimuth,
    },
    marks,
    geometry: sightGeometry(
      marks.flatMap(({ name, horizontal }) => {
        const mark = control.get(name)!;
        return horizontal ? Math.atan2(mark.easting - station.easting, mark.northing - station.northing) : [];
      }),
    ),
    faceErrors: adjusted.faceErrors,
    explanations: explain(adjusted, statistics.standardised),
  };
}

function fittedStation(
  { origin }: StationModel,
  solution: Solution,
  cofactors: Cofactors,
  scale: number,
): Station {
  const { unknowns } = solution;
  const covariance = new Float64Array(STATION_UNKNOWNS * STATION_UNKNOWNS);
  for (let i = 0; i < STATION_UNKNOWNS; i++) {
    for (let j = 0; j < STATION_UNKNOWNS; j++) {
      covariance[i * STATION_UNKNOWNS + j] = cofactors.of(i, j) * scale * scale;
    }
  }
  return {
    easting: origin.easting + unknowns[EASTING],
    northing: origin.northing + unknowns[NORTHING],
    axis: unknowns[AXIS],
    orientation: wrapTurn(unknowns[ORIENTATION]),
    refraction: unknowns[REFRACTION],
    covariance,
  };
}

function fittedReading(
  row: number,
  model: StationModel,
  solution: Solution,
  statistics: Reliability,
): FittedReading {
  const { kind, set, face } = model.readings[row];
  return {
    kind,
    set,
    faces: face === 0 ? 'both' : face > 0 ? 'left' : 'right',
    residual: solution.residuals[row],
    standardised: statistics.standardised[row],
    redundancy: statistics.redundancy[row],
    minimalDetectable: statistics.minimalDetectable[row],
  };
}

/** Mean over a mark's erections and sets of the polar position minus its published coordinates. */
function markResidual(
  mark: ControlMark,
  station: Station,
  model: StationModel,
  erections: readonly { target: string; targetHeight: number }[],
  surroundings: Surroundings,
): FittedMark['residual'] {
  const places: { point: Point; withHeight: boolean }[] = [];
  // Readings of one erection and set stand together.
  const groups: { erection: number; set: number; values: Partial<Record<ReadingKind, number>> }[] = [];
  for (const { kind, erection, set, value } of model.readings) {
    if (erections[erection].target !== mark.name) continue;
    let group = groups.at(-1);
    if (group?.erection !== erection || group.set !== set) {
      group = { erection, set, values: {} };
      groups.push(group);
    }
    group.values[kind] = value;
  }
  for (const { erection, values } of groups) {
    const { direction, zenith, distance } = values;
    const { targetHeight } = erections[erection];
    if (direction === undefined || distance === undefined) continue;
    if (zenith !== undefined) {
      const point = polarPoint(station, { direction, zenith, distance, targetHeight }, surroundings);
      places.push({ point, withHeight: mark.elevation !== null });
    } else if (mark.elevation !== null) {
      const reading = { direction, distance, targetHeight, elevation: mark.elevation };
      places.push({ point: polarPointAtElevation(station, reading, surroundings), withHeight: false });
    }
  }
  const mean = (values: number[]) =>
    values.length ? values.reduce((a, b) => a + b, 0) / values.length : null;
  return {
    easting: mean(places.map(({ point }) => point.easting - mark.easting)),
    northing: mean(places.map(({ point }) => point.northing - mark.northing)),
    elevation: mean(
      places.flatMap(({ point, withHeight }) => (withHeight ? point.elevation - mark.elevation! : [])),
    ),
  };
}

/**
 * Covariance of the station with the error of a mark's published coordinates. Where one unknown carries the
 * mark's error and its reflector's together, the mark's part is its share of the variance.
 */
function stationCovariance(
  model: StationModel,
  cofactors: Cofactors,
  mark: ControlMark,
  erections: readonly { target: string; centringSigma: number; heightSigma: number }[],
  scale: number,
): Float64Array {
  const standing = erections.filter((erection) => erection.target === mark.name);
  const share = (published: number, reflector: number) =>
    standing.length > 1 ? 1 : published ** 2 / (published ** 2 + reflector ** 2);
  const horizontal = share(mark.horizontalSigma, standing[0].centringSigma);
  const vertical = mark.elevation === null ? 0 : share(mark.verticalSigma, standing[0].heightSigma);
  const first = model.markUnknown(mark.name);
  const result = new Float64Array(STATION_UNKNOWNS * 3);
  for (let i = 0; i < STATION_UNKNOWNS; i++) {
    for (let axis = 0; axis < 3; axis++) {
      const part = axis === 2 ? vertical : horizontal;
      result[i * 3 + axis] = cofactors.of(i, first + axis) * part * scale * scale;
    }
  }
  return result;
}
