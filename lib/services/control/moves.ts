import type { ControlMove } from '@/lib/compute/survey/controlMove';
import type { UnitMixUp } from '@/lib/compute/units/mixUp';
import type { Lengths } from '@/lib/services/lengths';

const LOOKS_LIKE: Record<UnitMixUp, string> = {
  metresAsFeet: 'metres sent as feet',
  feetAsMetres: 'feet sent as metres',
  otherFoot: 'one foot sent as the other',
};

/** `would move 33,796 ft: it looks like feet sent as metres`. */
export function moveText({ distance, mixUp }: ControlMove, length: Lengths): string {
  const far = length.out(distance);
  const figure = far.toLocaleString('en-US', { maximumFractionDigits: far < 100 ? 1 : 0 });
  const text = `would move ${figure} ${length.name}`;
  return mixUp === null ? text : `${text}: it looks like ${LOOKS_LIKE[mixUp]}`;
}

/** How to go on with a point that would move so far. */
export const MOVE_FIX =
  'Check the unit and the frame of the coordinates. Bring a mark that stands elsewhere in under a new name. Where the move is meant, repeat with ?revise=true and confirmUnits true.';
