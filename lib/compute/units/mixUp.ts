import { LENGTH } from './table';

/** What lengths were taken for. */
export type UnitMixUp = 'metresAsFeet' | 'feetAsMetres' | 'otherFoot';

/** What lengths of a wrong unit are to be multiplied by. */
const FACTORS: readonly [UnitMixUp, number][] = [
  ['metresAsFeet', 1 / LENGTH.ft],
  ['metresAsFeet', 1 / LENGTH.ftUS],
  ['feetAsMetres', LENGTH.ft],
  ['feetAsMetres', LENGTH.ftUS],
  ['otherFoot', LENGTH.ftUS / LENGTH.ft],
  ['otherFoot', LENGTH.ft / LENGTH.ftUS],
];

/** How much of a disagreement may be left once the unit is set right. */
const LEFT_OVER = 0.02;

/**
 * Whether lengths disagree with what is known as one unit does with another: multiplied by the factor between the two
 * they agree within `slack`, and all but a fiftieth of the disagreement is gone. Null where no pair of units does that.
 *
 * @param sent a height, or coordinates, in the unit of `known`
 */
export function unitMixUp(
  sent: readonly number[],
  known: readonly number[],
  slack: number,
): UnitMixUp | null {
  const apart = (factor: number) => Math.hypot(...sent.map((value, i) => value * factor - known[i]));
  const limit = Math.min(slack, LEFT_OVER * apart(1));
  const found = FACTORS.find(([, factor]) => apart(factor) < limit);
  return found ? found[0] : null;
}
