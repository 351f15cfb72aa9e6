import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { type Ellipse, ellipseFactor95, standardEllipse } from '@/lib/compute/adjustment/ellipse';
import { type GlobalTest, globalTest } from '@/lib/compute/adjustment/globalTest';
import { type Reliability, reliability } from '@/lib/compute/adjustment/reliability';
import type { Solution } from '@/lib/compute/adjustment/solve';
import { wrapTurn } from '@/lib/compute/units/angles';
import { type BacksightCheck, backsightChecks } from './backsights';
import { type DangerCircle, dangerCircle, isLost } from './dangerCircle';
import { type DirectionSets, directionSets } from './directionSets';
import { type Explanation, explain } from './explain';
import type { FaceErrors, ReadingKind } from './faces';
import { type SightGeometry, sightGeometry } from './geometry';
import { type MarkShift, shiftOf, shiftsWithout } from './leaveOneOut';
import { type OtherStation, otherStations } from './otherStations';
import { type Point, polarPoint, polarPointAtElevation, STATION_UNKNOWNS, type Station } from './polarPoint';
import type { ControlMark } from './shots';
import {
  type AdjustedStation,
  adjustStation,
  marksOfKind,
  type Occupied,
  StationError,
  type StationInput,
} from './stationAdjustment';
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
  /** What its readings miss by at the mark, observed minus fitted, m: sideways (right is plus), along the sight, up. */
  miss: { across: number | null; along: number | null; up: number | null };
  /** How the station moves without this mark; null where the others do not determine it. */
  without: MarkShift | null;
  /** Covariance of (station's five unknowns) with the error of the published coordinates, 5 × 3 row by row. */
  stationCovariance: Float64Array;
}

/** The mark under the instrument, as the fit leaves it. */
export interface FittedOccupation {
  name: string;
  version: number;
  status: ControlMark['status'];
  published: Pick<ControlMark, 'easting' | 'northing' | 'elevation'>;
  instrumentHeight: number;
  /** Station from the fit minus published coordinates, m. */
  residual: { easting: number; northing: number; elevation: number | null };
  /** w of the coordinates that hold the axis; null where nothing else controls them. */
  standardised: { easting: number | null; northing: number | null; elevation: number | null };
  /** How the station moves when it is free of its mark; null where the backsights do not determine it. */
  without: MarkShift | null;
  /** How the axis moves without the elevation of its mark, m; null where the backsights have no height. */
  heightWithout: number | null;
}

export interface StationFit {
  station: Station;
  heightDetermined: boolean;
  /** Without it, only the place is known: no direction was read. */
  orientationDetermined: boolean;
  /** Of a setup over a mark; null of a free station. */
  occupied: FittedOccupation | null;
  /** Distances and heights to the backsights of a setup over a mark, against published coordinates. */
  backsights: BacksightCheck[];
  /** Of a free station without distances. */
  danger: DangerCircle | null;
  /** Other stations that fit the shots as well. */
  others: OtherStation[];
  /** Marks to which a distance was read that could not be brought to the horizontal. */
  unusedDistances: string[];
  directionSets: DirectionSets | null;
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
 * Station from shots to known marks, free or over a mark: directions, zenith angles and slope distances in one
 * weighted adjustment, with statistics and every mark left out in turn.
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
  const danger = dangerOf(adjusted, station, axes.semiMajor);
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
      miss: missOf(mark, own, adjusted, station),
      readings: own.map((row) => fittedReading(row, model, solution, statistics)),
      without: shifts[block],
      stationCovariance: stationCovariance(model, cofactors, mark, erections, scale),
    };
  });
  return {
    station,
    heightDetermined: model.heightDetermined,
    orientationDetermined: model.orientationDetermined,
    occupied: occupation(adjusted, station, statistics),
    backsights: backsightChecks(adjusted),
    danger,
    others: otherStations(adjusted),
    unusedDistances: adjusted.unusedDistances,
    directionSets: directionSets(readings, erections),
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
    faceErrors: adjusted.means.faceErrors,
    explanations: explain(adjusted, statistics.standardised),
  };
}

/** @throws StationError where the station is as good as on the circle through its marks */
function dangerOf(
  { angleOnly, readings, erections, input }: AdjustedStation,
  station: Station,
  semiMajor: number,
): DangerCircle | null {
  if (!angleOnly) return null;
  const marks = marksOfKind('direction', readings, erections, input.control);
  const danger = dangerCircle(marks, station);
  if (danger && isLost(danger, semiMajor)) throw new StationError('danger_circle', danger.marks);
  return danger;
}

function occupation(
  { input, model, solution }: AdjustedStation,
  station: Station,
  { standardised }: Reliability,
): FittedOccupation | null {
  if (!input.occupied) return null;
  const { mark, instrumentHeight } = input.occupied;
  const hasElevation = mark.elevation !== null;
  const w = (unknown: number) => {
    const value = standardised[model.heldRow(unknown)];
    return Number.isFinite(value) ? value : null;
  };
  return {
    name: mark.name,
    version: mark.version,
    status: mark.status,
    published: { easting: mark.easting, northing: mark.northing, elevation: mark.elevation },
    instrumentHeight,
    residual: {
      easting: station.easting - mark.easting,
      northing: station.northing - mark.northing,
      elevation: hasElevation ? station.axis - instrumentHeight - mark.elevation! : null,
    },
    standardised: {
      easting: w(EASTING),
      northing: w(NORTHING),
      elevation: hasElevation ? w(AXIS) : null,
    },
    without: withoutMark(input, model, solution),
    heightWithout: withoutElevation(input, input.occupied, solution),
  };
}

/** The same shots as those of a free station. */
function withoutMark(input: StationInput, model: StationModel, { unknowns }: Solution): MarkShift | null {
  const free = adjustedOrNull({ ...input, occupied: null });
  if (!free || otherStations(free).length > 0) return null;
  const origins = [model.origin, free.model.origin];
  const [east, north] = [origins[1].easting - origins[0].easting, origins[1].northing - origins[0].northing];
  const moved = shiftOf((unknown) => {
    const origin = unknown === EASTING ? east : unknown === NORTHING ? north : 0;
    return free.solution.unknowns[unknown] - unknowns[unknown] + origin;
  });
  return { ...moved, vertical: free.model.heightDetermined ? moved.vertical : null };
}

/** The same over a mark whose elevation nobody knows. */
function withoutElevation(input: StationInput, occupied: Occupied, { unknowns }: Solution): number | null {
  const mark = { ...occupied.mark, elevation: null };
  const flat = adjustedOrNull({ ...input, occupied: { ...occupied, mark } });
  return flat?.model.heightDetermined ? flat.solution.unknowns[AXIS] - unknowns[AXIS] : null;
}

function adjustedOrNull(input: StationInput): AdjustedStation | null {
  try {
    const adjusted = adjustStation(input);
    return adjusted.solution.converged ? adjusted : null;
  } catch (error) {
    if (error instanceof StationError) return null;
    throw error;
  }
}

/** What the readings of a mark miss by, as lengths at the mark: means over sets and erections. */
function missOf(
  mark: ControlMark,
  rows: readonly number[],
  { readings, solution }: AdjustedStation,
  station: Station,
): FittedMark['miss'] {
  const distance = Math.hypot(mark.easting - station.easting, mark.northing - station.northing);
  const meanOf = (kind: ReadingKind) => {
    const own = rows.filter((row) => readings[row].kind === kind);
    return own.length === 0 ? null : own.reduce((sum, row) => sum + solution.residuals[row], 0) / own.length;
  };
  const [direction, along, zenith] = [meanOf('direction'), meanOf('distance'), meanOf('zenith')];
  return {
    across: direction === null ? null : direction * distance,
    along,
    // A zenith angle counts downwards.
    up: zenith === null || mark.elevation === null ? null : -zenith * distance,
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
