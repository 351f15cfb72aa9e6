import { SingularError } from '@/lib/compute/adjustment/model';
import { type Solution, solve } from '@/lib/compute/adjustment/solve';
import { wrapDifference } from '@/lib/compute/units/angles';
import { AXIS, EASTING, NORTHING, ORIENTATION, type StationModel } from './stationModel';

/** How the station moves without a mark: its place without the mark minus its place with it. */
export interface MarkShift {
  easting: number;
  northing: number;
  /** Their length, m. */
  horizontal: number;
  /** Signed, m; null where this mark alone carries the height. */
  vertical: number | null;
  /** Turn of the orientation, rad. */
  orientation: number;
}

/** Above this the linear answer is not good enough and the rest is adjusted anew, m. */
export const NONLINEAR = 1e-5;

/**
 * How far the station moves with each mark left out in turn, one a block; null where the others do not determine
 * it. One Gauss-Newton step from the solution is exact but for shift²/distance; where that counts, the
 * adjustment is repeated without the mark.
 */
export function shiftsWithout(model: StationModel, solution: Solution): (MarkShift | null)[] {
  if (model.marks.length < 2 && !model.occupied) return model.marks.map(() => null);
  return model.marks.map((_, block) => {
    const full = orSingular(() => solution.normals.stepWithout(block));
    if (!(full instanceof SingularError)) return shift(model, solution, block, full);
    if (full.unknown !== AXIS) return null;
    const flat = orSingular(() => solution.normals.stepWithout(block, AXIS));
    if (flat instanceof SingularError) return null;
    return { ...shiftOf((unknown) => flat[unknown]), vertical: null };
  });
}

function shift(model: StationModel, solution: Solution, block: number, step: Float64Array): MarkShift | null {
  const { unknowns } = solution;
  const linear = shiftOf((unknown) => step[unknown]);
  const length = Math.hypot(linear.horizontal, linear.vertical);
  if (length * length < NONLINEAR * nearestOther(model, unknowns, block)) return linear;
  const repeated = orSingular(() => solve(model, unknowns, { without: block }));
  if (repeated instanceof SingularError) return null;
  // The rest contradicts itself grossly: then the first step says well enough that the shift is large.
  if (!repeated.converged) return linear;
  return shiftOf((unknown) => repeated.unknowns[unknown] - unknowns[unknown]);
}

/** @param moved how far an unknown of the station moves */
export function shiftOf(moved: (unknown: number) => number) {
  const [easting, northing] = [moved(EASTING), moved(NORTHING)];
  return {
    easting,
    northing,
    horizontal: Math.hypot(easting, northing),
    vertical: moved(AXIS),
    orientation: wrapDifference(moved(ORIENTATION)),
  };
}

/** What an attempt gives, or which unknown it leaves undetermined. */
export function orSingular<T>(attempt: () => T): T | SingularError {
  try {
    return attempt();
  } catch (error) {
    if (error instanceof SingularError) return error;
    throw error;
  }
}

function nearestOther(model: StationModel, unknowns: Float64Array, without: number): number {
  let nearest = Number.POSITIVE_INFINITY;
  for (let block = 0; block < model.marks.length; block++) {
    if (block === without) continue;
    const first = model.blocks[block];
    const distance = Math.hypot(
      unknowns[first] - unknowns[EASTING],
      unknowns[first + 1] - unknowns[NORTHING],
    );
    nearest = Math.min(nearest, distance);
  }
  return nearest;
}
