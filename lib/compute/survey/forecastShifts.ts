import { standardEllipse } from '@/lib/compute/adjustment/ellipse';
import { SingularError } from '@/lib/compute/adjustment/model';
import { ELLIPSE_95, NORMAL_95 } from '@/lib/compute/statistics/distributions';
import { type MarkShift, orSingular } from './leaveOneOut';
import { STATION_UNKNOWNS, type Station } from './polarPoint';
import type { AdjustedStation } from './stationAdjustment';
import { AXIS, EASTING, NORTHING, ORIENTATION } from './stationModel';

/**
 * How far the station may move with each mark left out in turn, one a block, at 95 % and without any mistake; null
 * where the others do not determine it. What all marks give is the best estimate, and what another one differs from
 * it by is uncorrelated with it (Rao, Linear Statistical Inference, §5a.2): the shift has the covariance Q₋ − Q.
 * Horizontal: the major half-axis of its 95 % ellipse, so that the true length stays below it at least as often.
 *
 * @param station with a-priori covariances
 */
export function shiftSpreads({ model, solution }: AdjustedStation, station: Station): (MarkShift | null)[] {
  if (model.marks.length < 2) return model.marks.map(() => null);
  const grown = (without: Float64Array, i: number, j: number) =>
    without[i * model.shared + j] - station.covariance[i * STATION_UNKNOWNS + j];
  const spread = (without: Float64Array, unknown: number) =>
    NORMAL_95 * Math.sqrt(Math.max(0, grown(without, unknown, unknown)));
  const plan = (without: Float64Array) => {
    const east = Math.max(0, grown(without, EASTING, EASTING));
    const north = Math.max(0, grown(without, NORTHING, NORTHING));
    return {
      easting: spread(without, EASTING),
      northing: spread(without, NORTHING),
      horizontal: ELLIPSE_95 * standardEllipse(east, north, grown(without, EASTING, NORTHING)).semiMajor,
      orientation: spread(without, ORIENTATION),
    };
  };
  return model.marks.map((_, block) => {
    const full = orSingular(() => solution.normals.cofactorsWithout(block));
    if (!(full instanceof SingularError)) {
      return { ...plan(full), vertical: model.heightDetermined ? spread(full, AXIS) : null };
    }
    if (full.unknown !== AXIS) return null;
    const flat = orSingular(() => solution.normals.cofactorsWithout(block, AXIS));
    return flat instanceof SingularError ? null : { ...plan(flat), vertical: null };
  });
}
