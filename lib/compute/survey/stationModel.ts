import type { AdjustmentModel } from '@/lib/compute/adjustment/model';
import { RowBuilder } from '@/lib/compute/adjustment/rows';
import { wrapDifference } from '@/lib/compute/units/angles';
import type { Erection, Reading } from './faces';
import type { InstrumentAccuracy } from './instrument';
import { rayTo } from './ray';
import type { ControlMark } from './shots';
import type { StartValues } from './startValues';
import type { Surroundings } from './surroundings';

/** Unknowns of the station, in this order; the rest of the shared ones follow where they are needed. */
export const EASTING = 0;
export const NORTHING = 1;
export const AXIS = 2;
export const ORIENTATION = 3;
export const REFRACTION = 4;

/**
 * Holds an unknown that nothing in the setup determines, m. It then takes no part, and no redundancy comes of it,
 * whatever the figure.
 */
export const UNDETERMINED_SIGMA = 0.1;
/** The same for the orientation of a circle that was not read, rad. */
const UNDETERMINED_TURN = 1;
/** An error that is stated to be zero, m or rad: small beside everything, and still a weight. */
const NEGLIGIBLE_SIGMA = 1e-9;

export interface StationModel extends AdjustmentModel {
  /** Row of each reading; its rows come first, pseudo-observations after them. */
  readonly readings: readonly Reading[];
  /** Start values of all unknowns. */
  readonly start: Float64Array;
  /**
   * Added to unknown eastings and northings, m. They are counted from the start position: in grid coordinates of
   * millions of metres the last digit alone would be too coarse for the iteration to settle.
   */
  readonly origin: { easting: number; northing: number };
  /** Names of the marks, one a block. */
  readonly marks: readonly string[];
  /** Unknowns of a mark's coordinates, as its block begins: easting, northing, elevation. */
  markUnknown(mark: string): number;
  /** Row of the pseudo-observation that holds an unknown, −1 where none does. */
  heldRow(unknown: number): number;
  /** Whether the occupied mark has an elevation, or any mark with one was seen with a zenith angle. */
  readonly heightDetermined: boolean;
  /** The mark that holds the axis; null of a free station. */
  readonly occupied: OccupiedAxis | null;
  /** Whether any direction was read. */
  readonly orientationDetermined: boolean;
}

/** A mark that the instrument stands over: where its axis should be, and how well that is known, m. */
export interface OccupiedAxis {
  easting: number;
  northing: number;
  /** Elevation of the tilting axis; null where the mark has none. */
  axis: number | null;
  horizontalSigma: number;
  verticalSigma: number;
}

/**
 * The three-dimensional setup as a least-squares problem. Shared unknowns: the tilting axis, the orientation, the
 * coefficient of refraction, and, where single faces or an unknown atmosphere leave them in, collimation,
 * vertical index and the scale of all distances. A block for each mark: its coordinates, held by their published
 * standard deviations, and the centring and height errors of each reflector that stood on it.
 *
 * Over an occupied mark the axis itself is held by the mark's coordinates and the instrument's height.
 *
 * With one erection on a mark its errors cannot be told from the mark's own, so they share three unknowns with
 * the variances added; only a second erection gets unknowns of its own.
 */
export function stationModel(input: {
  erections: readonly Erection[];
  readings: readonly Reading[];
  control: ReadonlyMap<string, ControlMark>;
  accuracy: InstrumentAccuracy;
  surroundings: Surroundings;
  atmosphereKnown: boolean;
  start: StartValues;
  occupied: OccupiedAxis | null;
}): StationModel {
  const { erections, readings, control, accuracy, surroundings, start, occupied } = input;
  const rows = new RowBuilder();

  let shared = 5;
  const singleFace = (kind: Reading['kind']) => readings.some((r) => r.kind === kind && r.face !== 0);
  const collimation = singleFace('direction') ? shared++ : -1;
  const index = singleFace('zenith') ? shared++ : -1;
  const scale = !input.atmosphereKnown && readings.some((r) => r.kind === 'distance') ? shared++ : -1;

  const marks = [...new Set(erections.map((erection) => erection.target))];
  const blocks = new Int32Array(marks.length + 1);
  blocks[0] = shared;
  /** First unknown of the mark's coordinates and, for second erections, of the erection's own errors. */
  const markStart = new Map<string, number>();
  const ownStart = new Int32Array(erections.length).fill(-1);
  marks.forEach((name, b) => {
    markStart.set(name, blocks[b]);
    let next = blocks[b] + 3;
    const standing = erections.flatMap((erection, e) => (erection.target === name ? e : []));
    if (standing.length > 1) {
      for (const e of standing) {
        ownStart[e] = next;
        next += 3;
      }
    }
    blocks[b + 1] = next;
  });

  for (const { kind, erection, face, sigma } of readings) {
    const columns = kind === 'direction' ? [EASTING, NORTHING, ORIENTATION] : [EASTING, NORTHING, AXIS];
    if (kind === 'zenith') columns.push(REFRACTION);
    if (kind === 'direction' && face !== 0) columns.push(collimation);
    if (kind === 'zenith' && face !== 0) columns.push(index);
    if (kind === 'distance' && scale >= 0) columns.push(scale);
    const first = markStart.get(erections[erection].target)!;
    const own = ownStart[erection];
    for (let axis = 0; axis < (kind === 'direction' ? 2 : 3); axis++) {
      columns.push(first + axis);
      if (own >= 0) columns.push(own + axis);
    }
    rows.add(columns, sigma);
  }

  const x = new Float64Array(blocks[marks.length]);
  x.set([0, 0, start.elevation, start.orientation, surroundings.refraction]);
  const held: { unknown: number; value: number }[] = [];
  const hold = (unknown: number, value: number, sigma: number) => {
    rows.add([unknown], Math.max(sigma, NEGLIGIBLE_SIGMA));
    held.push({ unknown, value });
    x[unknown] = value;
  };
  hold(REFRACTION, surroundings.refraction, surroundings.refractionSigma);
  if (collimation >= 0) hold(collimation, 0, accuracy.collimation);
  if (index >= 0) hold(index, 0, accuracy.collimation);
  if (scale >= 0) hold(scale, 0, surroundings.unknownAtmospherePpm * 1e-6);
  const zenithsTo = new Set(
    readings.flatMap(({ kind, erection }) => (kind === 'zenith' ? erections[erection].target : [])),
  );
  for (const [b, name] of marks.entries()) {
    const mark = control.get(name)!;
    const first = blocks[b];
    const standing = erections.filter((erection) => erection.target === name);
    const merged = standing.length === 1 ? standing[0] : null;
    const horizontal = Math.hypot(mark.horizontalSigma, merged?.centringSigma ?? 0);
    const vertical = Math.hypot(mark.verticalSigma, merged?.heightSigma ?? 0);
    hold(first, mark.easting - start.easting, horizontal);
    hold(first + 1, mark.northing - start.northing, horizontal);
    if (mark.elevation !== null) hold(first + 2, mark.elevation, vertical);
    else if (zenithsTo.has(name)) x[first + 2] = start.elevation;
    else hold(first + 2, start.elevation, UNDETERMINED_SIGMA);
  }
  erections.forEach((erection, e) => {
    if (ownStart[e] < 0) return;
    hold(ownStart[e], 0, erection.centringSigma);
    hold(ownStart[e] + 1, 0, erection.centringSigma);
    hold(ownStart[e] + 2, 0, erection.heightSigma);
  });
  const occupiedAxis = occupied?.axis ?? null;
  if (occupied) {
    hold(EASTING, occupied.easting - start.easting, occupied.horizontalSigma);
    hold(NORTHING, occupied.northing - start.northing, occupied.horizontalSigma);
    if (occupiedAxis !== null) hold(AXIS, occupiedAxis, occupied.verticalSigma);
  }
  const heightDetermined =
    occupiedAxis !== null || [...zenithsTo].some((name) => control.get(name)!.elevation !== null);
  if (!heightDetermined) hold(AXIS, start.elevation, UNDETERMINED_SIGMA);
  const orientationDetermined = readings.some(({ kind }) => kind === 'direction');
  if (!orientationDetermined) hold(ORIENTATION, 0, UNDETERMINED_TURN);

  const structure = rows.build();
  const firstOf = Int32Array.from(readings, ({ erection }) => markStart.get(erections[erection].target)!);
  const heldUnknown = Int32Array.from(held, (h) => h.unknown);
  const heldValue = Float64Array.from(held, (h) => h.value);
  return {
    ...structure,
    unknowns: x.length,
    shared,
    blocks,
    readings,
    start: x,
    origin: { easting: start.easting, northing: start.northing },
    marks,
    markUnknown: (name) => markStart.get(name)!,
    heldRow(unknown) {
      const index = heldUnknown.indexOf(unknown);
      return index < 0 ? -1 : readings.length + index;
    },
    heightDetermined,
    orientationDetermined,
    occupied,
    linearise(point, coefficients, misclosures) {
      for (let i = 0; i < readings.length; i++) {
        const { kind, erection, value, face } = readings[i];
        const first = firstOf[i];
        const own = ownStart[erection];
        let east = point[first] - point[EASTING];
        let north = point[first + 1] - point[NORTHING];
        let height = point[first + 2] + erections[erection].targetHeight - point[AXIS];
        if (own >= 0) {
          east += point[own];
          north += point[own + 1];
          height += point[own + 2];
        }
        const ray = rayTo(east, north, height, point[REFRACTION], surroundings);
        let e = structure.rowStart[i];
        const put = (coefficient: number) => {
          coefficients[e++] = coefficient;
        };
        const putPlace = (coefficient: number) => {
          put(coefficient);
          if (own >= 0) put(coefficient);
        };
        if (kind === 'direction') {
          const sine = face === 0 ? 0 : face / Math.sin(ray.zenith);
          const computed = ray.azimuth - point[ORIENTATION] + (face === 0 ? 0 : sine * point[collimation]);
          misclosures[i] = wrapDifference(value - computed);
          put(-ray.azimuthEast);
          put(-ray.azimuthNorth);
          put(-1);
          if (face !== 0) put(sine);
          putPlace(ray.azimuthEast);
          putPlace(ray.azimuthNorth);
          continue;
        }
        const perGrid = kind === 'zenith' ? ray.zenithGrid : ray.slopeGrid;
        const perHeight = kind === 'zenith' ? ray.zenithHeight : ray.slopeHeight;
        const perEast = (perGrid * east) / ray.grid;
        const perNorth = (perGrid * north) / ray.grid;
        const factor = kind === 'distance' && scale >= 0 ? 1 + point[scale] : 1;
        if (kind === 'zenith') {
          misclosures[i] = wrapDifference(value - (ray.zenith + (face === 0 ? 0 : face * point[index])));
        } else {
          misclosures[i] = value - ray.slope * factor;
        }
        put(-perEast * factor);
        put(-perNorth * factor);
        put(-perHeight * factor);
        if (kind === 'zenith') {
          put(ray.zenithRefraction);
          if (face !== 0) put(face);
        } else if (scale >= 0) put(ray.slope);
        putPlace(perEast * factor);
        putPlace(perNorth * factor);
        putPlace(perHeight * factor);
      }
      const base = readings.length;
      for (let h = 0; h < heldUnknown.length; h++) {
        coefficients[structure.rowStart[base + h]] = 1;
        misclosures[base + h] = heldValue[h] - point[heldUnknown[h]];
      }
    },
  };
}
