import { type UnitMixUp, unitMixUp } from '@/lib/compute/units/mixUp';

/** A mark that stands is not found so far, m, from where it was published. Common practice, not a rule. */
export const GREAT_MOVE = 1;

interface Place {
  easting: number;
  northing: number;
  /** Null where it is not known. */
  elevation: number | null;
}

export interface ControlMove {
  /** m, in space where both heights are known. */
  distance: number;
  mixUp: UnitMixUp | null;
}

/** How far a control point would move, where that is further than any mark moves, and the mix-up that it looks like. */
export function greatMove(before: Place, after: Place): ControlMove | null {
  const both = before.elevation !== null && after.elevation !== null;
  const vector = ({ easting, northing, elevation }: Place) =>
    both && elevation !== null ? [easting, northing, elevation] : [easting, northing];
  const [from, to] = [vector(before), vector(after)];
  const distance = Math.hypot(...to.map((value, i) => value - from[i]));
  return distance > GREAT_MOVE ? { distance, mixUp: unitMixUp(to, from, GREAT_MOVE) } : null;
}
