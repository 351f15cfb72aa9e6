import { factor, solveLower } from '@/lib/compute/adjustment/cholesky';
import type { AdjustmentModel } from '@/lib/compute/adjustment/model';
import { RowBuilder } from '@/lib/compute/adjustment/rows';
import { type FittedSetup, type LaterShots, type LaterSight, laterSights } from './checkShots';
import { polarCovariance, polarJacobian, polarPoint, STATION_UNKNOWNS } from './polarPoint';
import { AXIS, EASTING, NORTHING, ORIENTATION } from './stationModel';

/** How a setup stands later against how it was fitted: m, and rad of its circle. */
export interface StationMove {
  easting: number;
  northing: number;
  axis: number;
  orientation: number;
}

export const STEADY_STATION: StationMove = { easting: 0, northing: 0, axis: 0, orientation: 0 };

export interface LaterModel extends AdjustmentModel {
  readonly sights: readonly LaterSight[];
  /** The rows of each sight, and what station (unknowns 0 to 4), mark and reflector have to do with each of them. */
  readonly rowsOfSight: readonly { row: number; station: number[]; place: number[] }[][];
}

/** An error that is stated to be zero: small beside everything, and still a weight. */
const NEGLIGIBLE = 1e-9;

/**
 * Later shots from a setup that stands as it was fitted. Observed is the polar position of each reflector from the
 * fitted station minus its published mark, in rows that its own covariance is taken out of (L⁻¹ of its Cholesky
 * factor). Unknowns are the errors of station and published marks, held by the covariance that the fit left them with
 * in the same way; and collimation, index and scale where single faces or an unknown atmosphere leave them in. Linear:
 * what has changed since the fit is a suspicion beside them.
 *
 * @param moved about where the station is taken to stand by now
 * @returns null where no mark was fully read
 */
export function laterModel(
  input: LaterShots & FittedSetup,
  moved: StationMove = STEADY_STATION,
): LaterModel | null {
  const { surroundings, accuracy } = input;
  const sights = laterSights(input);
  if (sights.length === 0) return null;
  const station = {
    ...input.station,
    easting: input.station.easting + moved.easting,
    northing: input.station.northing + moved.northing,
    axis: input.station.axis + moved.axis,
    orientation: input.station.orientation + moved.orientation,
    covariance: new Float64Array(STATION_UNKNOWNS ** 2),
  };
  const marks = [...new Set(sights.map(({ mark }) => mark))];
  const joint = STATION_UNKNOWNS + 3 * marks.length;
  let next = joint;
  const collimation = sights.some(({ singleFace }) => singleFace.direction) ? next++ : -1;
  const index = sights.some(({ singleFace }) => singleFace.zenith) ? next++ : -1;
  const scale = input.ppm === null ? next++ : -1;

  const rows = new RowBuilder();
  const coefficients: number[] = [];
  const misclosures: number[] = [];
  const add = (entries: readonly [number, number][], misclosure: number, sigma = 1) => {
    const used = entries.filter(([column]) => column >= 0);
    for (const [, coefficient] of used) coefficients.push(coefficient);
    misclosures.push(misclosure);
    return rows.add(
      used.map(([column]) => column),
      sigma,
    );
  };

  const rowsOfSight = sights.map(({ mark, reading, sigmas, singleFace, targetHeight }) => {
    const point = polarPoint(station, { ...reading, targetHeight }, surroundings);
    const axes = input.heightDetermined && mark.elevation !== null ? 3 : 2;
    const off = [
      point.easting - mark.easting,
      point.northing - mark.northing,
      point.elevation - (mark.elevation ?? 0),
    ];
    const { station: ofStation, reading: ofReading } = polarJacobian(station, reading, surroundings);
    const own = leading(polarCovariance(station, reading, sigmas, surroundings), axes);
    factor(own, axes);
    const whitened = (column: (axis: number) => number) => {
      const values = Float64Array.from({ length: axes }, (_, axis) => column(axis));
      solveLower(own, axes, values);
      return values;
    };
    const stations = Array.from({ length: STATION_UNKNOWNS }, (_, k) =>
      whitened((axis) => ofStation[axis * STATION_UNKNOWNS + k]),
    );
    const places = Array.from({ length: axes }, (_, k) => whitened((axis) => (axis === k ? 1 : 0)));
    const byReading = (k: number, factorOf: number) => whitened((axis) => factorOf * ofReading[axis * 4 + k]);
    const turned = byReading(0, singleFace.direction ? 1 / Math.sin(reading.zenith) : 0);
    const tilted = byReading(1, singleFace.zenith ? 1 : 0);
    const stretched = byReading(2, reading.distance);
    const misses = whitened((axis) => off[axis]);
    const first = STATION_UNKNOWNS + 3 * marks.indexOf(mark);
    // Seen minus published = the mark's error minus what the fitted station is off by.
    return Array.from({ length: axes }, (_, i) => {
      const ofRow = stations.map((column) => -column[i]);
      const place = places.map((column) => column[i]);
      const row = add(
        [
          ...ofRow.map((value, k): [number, number] => [k, value]),
          ...place.map((value, k): [number, number] => [first + k, value]),
          [collimation, turned[i]],
          [index, tilted[i]],
          [scale, stretched[i]],
        ],
        misses[i],
      );
      return { row, station: ofRow, place };
    });
  });

  const held = jointFactor(input, marks);
  const inverse = new Float64Array(joint * joint);
  for (let i = 0; i < joint; i++) inverse[i * joint + i] = 1;
  solveLower(held, joint, inverse, joint);
  for (let i = 0; i < joint; i++) {
    const entries = Array.from({ length: i + 1 }, (_, j): [number, number] => [j, inverse[i * joint + j]]);
    add(entries, 0);
  }
  if (collimation >= 0) add([[collimation, 1]], 0, accuracy.collimation);
  if (index >= 0) add([[index, 1]], 0, accuracy.collimation);
  if (scale >= 0) add([[scale, 1]], 0, surroundings.unknownAtmospherePpm * 1e-6);

  const structure = rows.build();
  return {
    ...structure,
    unknowns: next,
    shared: next,
    blocks: Int32Array.of(next),
    sights,
    rowsOfSight,
    linearise(x, into, residuals) {
      into.set(coefficients);
      for (let row = 0; row < misclosures.length; row++) {
        let fitted = 0;
        for (let e = structure.rowStart[row]; e < structure.rowStart[row + 1]; e++)
          fitted += coefficients[e] * x[structure.columns[e]];
        residuals[row] = misclosures[row] - fitted;
      }
    },
  };
}

/** Cholesky factor of the covariance of station and published marks, as the fit left them. */
function jointFactor({ station, crossCovariance, scale }: FittedSetup, marks: readonly LaterSight['mark'][]) {
  const size = STATION_UNKNOWNS + 3 * marks.length;
  const covariance = new Float64Array(size * size);
  for (let i = 0; i < STATION_UNKNOWNS; i++) {
    for (let j = 0; j < STATION_UNKNOWNS; j++)
      covariance[i * size + j] = station.covariance[i * STATION_UNKNOWNS + j];
  }
  marks.forEach(({ name, horizontalSigma, verticalSigma }, m) => {
    const first = STATION_UNKNOWNS + 3 * m;
    const cross = crossCovariance.get(name);
    const own = [horizontalSigma, horizontalSigma, verticalSigma];
    for (let axis = 0; axis < 3; axis++) {
      const sigma = Math.max(own[axis] * (cross ? scale : 1), NEGLIGIBLE);
      covariance[(first + axis) * (size + 1)] = sigma ** 2;
      for (let i = 0; cross && i < STATION_UNKNOWNS; i++) {
        covariance[i * size + first + axis] = covariance[(first + axis) * size + i] = cross[i * 3 + axis];
      }
    }
  });
  factor(covariance, size);
  return covariance;
}

/** The leading part of a 3 × 3 matrix. */
function leading(matrix: Float64Array, size: number): Float64Array {
  return Float64Array.from({ length: size * size }, (_, i) => matrix[Math.floor(i / size) * 3 + (i % size)]);
}

/** Unknowns of the station that an instrument may have moved in, where its height is known and where it is not. */
export function movable(heightDetermined: boolean): readonly number[] {
  return heightDetermined ? [EASTING, NORTHING, AXIS, ORIENTATION] : [EASTING, NORTHING, ORIENTATION];
}
