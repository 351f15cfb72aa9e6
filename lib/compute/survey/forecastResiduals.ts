import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { standardEllipse } from '@/lib/compute/adjustment/ellipse';
import { ELLIPSE_95, NORMAL_95 } from '@/lib/compute/statistics/distributions';
import type { ReadingKind } from './faces';
import { polarJacobian, propagate, STATION_UNKNOWNS, type Station } from './polarPoint';
import type { AdjustedStation } from './stationAdjustment';
import { REFRACTION } from './stationModel';

export interface ResidualSpread {
  /** Major half-axis of the 95 % ellipse, m. */
  horizontal: number;
  /** 1.96 standard deviations, m; null where the mark has no elevation. */
  vertical: number | null;
}

/** One row's error in a mark's residual, by easting, northing and elevation. */
interface Share {
  row: number;
  along: readonly number[];
}

/**
 * What each mark's residual, polar position from the fitted station minus published coordinates, may be without any
 * mistake, one a block; null where direction, zenith angle and distance were not all read.
 *
 * With the station's Jacobian J and every row k that enters the polar position or the published coordinates directly,
 * by cₖ, the residual is J(x̂ − x) + Σ cₖeₖ. The adjustment correlates x̂ with the rows that it came from,
 * cov(x̂, eₖ) = Q aₖ (Mikhail and Gracie, Analysis and Adjustment of Survey Measurements, ch. 9), so
 *
 *   cov = J Q Jᵀ + Σ σₖ²cₖcₖᵀ + Σ (J Q aₖcₖᵀ + cₖaₖᵀQ Jᵀ).
 *
 * Collimation, index and scale stay in the polar position: they enter as the errors of what holds them.
 */
export function residualSpreads(adjusted: AdjustedStation, station: Station): (ResidualSpread | null)[] {
  const { model, solution, input, readings, erections } = adjusted;
  const cofactors = new Cofactors(solution);
  return model.marks.map((name): ResidualSpread | null => {
    const rows = readings.flatMap(({ erection }, row) => (erections[erection].target === name ? row : []));
    const meanOf = (kind: ReadingKind) => rows.map((row) => readings[row]).find((r) => r.kind === kind);
    const [direction, zenith, distance] = [meanOf('direction'), meanOf('zenith'), meanOf('distance')];
    if (!direction || !zenith || !distance) return null;
    const reading = { direction: direction.value, zenith: zenith.value, distance: distance.value };
    const jacobian = polarJacobian(station, reading, input.surroundings);
    const shares = sharesOf(adjusted, name, rows, jacobian.reading);
    const covariance = propagate(jacobian.station, station.covariance, STATION_UNKNOWNS);
    for (const { row, along } of shares) {
      const variance = 1 / model.weights[row];
      const cross = crossOf(adjusted, cofactors, row, jacobian.station);
      for (let i = 0; i < 3; i++) {
        for (let j = 0; j < 3; j++) {
          covariance[i * 3 + j] += variance * along[i] * along[j] + cross[i] * along[j] + along[i] * cross[j];
        }
      }
    }
    const { semiMajor } = standardEllipse(covariance[0], covariance[4], covariance[1]);
    const hasElevation = input.control.get(name)!.elevation !== null;
    return {
      horizontal: ELLIPSE_95 * semiMajor,
      vertical: hasElevation ? NORMAL_95 * Math.sqrt(covariance[8]) : null,
    };
  });
}

const KINDS: readonly ReadingKind[] = ['direction', 'zenith', 'distance'];

/** @param byReading ∂(easting, northing, elevation) by direction, zenith, distance and target height, 3 × 4 */
function sharesOf(
  { model, solution, readings }: AdjustedStation,
  name: string,
  rows: readonly number[],
  byReading: Float64Array,
): Share[] {
  const shares = new Map<number, number[]>();
  const add = (row: number, along: readonly number[]) => {
    const own = shares.get(row) ?? [0, 0, 0];
    shares.set(
      row,
      own.map((value, axis) => value + along[axis]),
    );
  };
  for (const row of rows) {
    const column = KINDS.indexOf(readings[row].kind);
    const count = rows.filter((other) => readings[other].kind === readings[row].kind).length;
    const along = [0, 1, 2].map((axis) => byReading[axis * 4 + column] / count);
    add(row, along);
    for (let e = model.rowStart[row]; e < model.rowStart[row + 1]; e++) {
      const unknown = model.columns[e];
      if (unknown <= REFRACTION || unknown >= model.shared) continue;
      add(
        model.heldRow(unknown),
        along.map((value) => -value * solution.coefficients[e]),
      );
    }
  }
  const first = model.markUnknown(name);
  for (let axis = 0; axis < 3; axis++) {
    const row = model.heldRow(first + axis);
    if (row >= 0)
      add(
        row,
        [0, 1, 2].map((a) => (a === axis ? -1 : 0)),
      );
  }
  return [...shares].map(([row, along]) => ({ row, along }));
}

/** J Q aₖ of a row. */
function crossOf(
  { model, solution }: AdjustedStation,
  cofactors: Cofactors,
  row: number,
  jacobian: Float64Array,
): Float64Array {
  const cross = new Float64Array(3);
  for (let u = 0; u < STATION_UNKNOWNS; u++) {
    let sum = 0;
    for (let e = model.rowStart[row]; e < model.rowStart[row + 1]; e++)
      sum += cofactors.of(u, model.columns[e]) * solution.coefficients[e];
    for (let axis = 0; axis < 3; axis++) cross[axis] += jacobian[axis * STATION_UNKNOWNS + u] * sum;
  }
  return cross;
}
