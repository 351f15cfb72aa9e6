import { wrapTurn } from '@/lib/compute/units/angles';
import type { AdjustedStation } from './stationAdjustment';
import { EASTING, NORTHING, ORIENTATION, type StationModel } from './stationModel';

/** A station that fits the same shots nearly as well as the one that was taken. */
export interface OtherStation {
  easting: number;
  northing: number;
  orientation: number;
  /** vᵀPv minus that of the station that was taken. */
  worseBy: number;
}

/** χ² with two degrees of freedom at 99.9 %: what fits worse than this the shots rule out. */
export const RULED_OUT = 13.8;
/** Stations nearer to each other are one, m: half of what would show in the coarsest work. */
const SAME_STATION = 0.005;

/** Two distances meet in two places, and so do other figures without redundancy: what else the shots may mean. */
export function otherStations({ model, solution, others }: AdjustedStation): OtherStation[] {
  if (others.length === 0) return [];
  const found = [placeOf(model, solution.unknowns)];
  const result: OtherStation[] = [];
  for (const other of others) {
    const worseBy = other.solution.weightedSquares - solution.weightedSquares;
    if (!other.solution.converged || worseBy > RULED_OUT) continue;
    const place = placeOf(other.model, other.solution.unknowns);
    const known = found.some(
      ({ easting, northing }) =>
        Math.hypot(place.easting - easting, place.northing - northing) < SAME_STATION,
    );
    if (known) continue;
    found.push(place);
    result.push({ ...place, worseBy });
  }
  return result;
}

function placeOf({ origin }: StationModel, unknowns: Float64Array) {
  return {
    easting: origin.easting + unknowns[EASTING],
    northing: origin.northing + unknowns[NORTHING],
    orientation: wrapTurn(unknowns[ORIENTATION]),
  };
}
