import { SingularError } from '@/lib/compute/adjustment/model';
import { type Solution, solve } from '@/lib/compute/adjustment/solve';
import { AXIS, EASTING, NORTHING, type StationModel } from './stationModel';

export interface MarkShift {
  /** Horizontal distance and signed height by which the station moves, m. */
  horizontal: number;
  vertical: number;
}

/** Above this the linear answer is not good enough and the rest is adjusted anew, m. */
const NONLINEAR = 1e-5;

/**
 * How far the station moves with each mark left out in turn, one a block; null where the others do not determine
 * it. One Gauss-Newton step from the solution is exact but for shift²/distance; where that counts, the
 * adjustment is repeated without the mark.
 */
export function shiftsWithout(model: StationModel, solution: Solution): (MarkShift | null)[] {
  const { unknowns } = solution;
  return model.marks.map((name, block) => {
    if (model.marks.length < 2) return null;
    try {
      let step: ArrayLike<number> = solution.normals.stepWithout(block);
      const nearest = nearestOther(model, unknowns, name);
      const length = Math.hypot(step[EASTING], step[NORTHING], step[AXIS]);
      if (!(length * length < NONLINEAR * nearest)) {
        const repeated = solve(model, unknowns, block);
        if (!repeated.converged) return null;
        step = repeated.unknowns.map((value, i) => value - unknowns[i]);
      }
      return { horizontal: Math.hypot(step[EASTING], step[NORTHING]), vertical: step[AXIS] };
    } catch (error) {
      if (error instanceof SingularError) return null;
      throw error;
    }
  });
}

function nearestOther(model: StationModel, unknowns: Float64Array, without: string): number {
  let nearest = Number.POSITIVE_INFINITY;
  for (const name of model.marks) {
    if (name === without) continue;
    const first = model.markUnknown(name);
    const distance = Math.hypot(
      unknowns[first] - unknowns[EASTING],
      unknowns[first + 1] - unknowns[NORTHING],
    );
    nearest = Math.min(nearest, distance);
  }
  return nearest;
}
