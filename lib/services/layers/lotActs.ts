import { whereabouts } from '@/lib/compute/grade/whereabouts';
import type { LotCheck, Outside } from './lotChecks';

/** Read out, or written out with every name. */
export type ActForm = 'radio' | 'listed';

/** How many names are read out, or listed. */
const MOST: Record<ActForm, number> = { radio: 5, listed: 20 };

/** Where to cut and to fill, in words without a full stop; null where nothing lies outside. */
export function trimAct(
  checks: readonly LotCheck[],
  { high, low }: Pick<Outside, 'high' | 'low'>,
  form: ActForm,
): string | null {
  const acts = [
    ...(high.length > 0 ? [`cut ${spotOf(checks, high, form)}`] : []),
    ...(low.length > 0 ? [`fill ${spotOf(checks, low, form)}`] : []),
  ];
  if (acts.length === 0) return null;
  const act = acts.length === 1 ? `${acts[0]} and shoot again` : `${acts.join(', ')}, and shoot again`;
  return `${act[0].toUpperCase()}${act.slice(1)}`;
}

/** The part of the lot in which these checks lie; those that lie elsewhere by name. */
function spotOf(checks: readonly LotCheck[], some: readonly number[], form: ActForm): string {
  const { part, strays } = whereabouts(checks, some);
  const names = (indices: readonly number[]) =>
    namesOf(
      indices.map((index) => checks[index].name),
      MOST[form],
    );
  if (part === null) return `at ${names(strays)}`;
  const inside = some.filter((index) => !strays.includes(index));
  const spot = form === 'radio' ? `the ${part}` : `the ${part} (${names(inside)})`;
  return strays.length === 0 ? spot : `${spot} and at ${names(strays)}`;
}

/** `a`, `a and b`, `a, b and c`, or `a, b and 3 more`. */
function namesOf(names: readonly string[], most: number): string {
  const shown = names.length > most ? [...names.slice(0, most), `${names.length - most} more`] : names;
  return shown.length === 1 ? shown[0] : `${shown.slice(0, -1).join(', ')} and ${shown.at(-1)}`;
}

/** The checks that are held, to be shot again. */
export function againAct(checks: readonly LotCheck[], form: ActForm): string {
  const held = checks.filter(({ verdict }) => verdict === 'hold').map(({ name }) => name);
  return `Shoot ${namesOf(held, MOST[form])} again from nearer by, in both faces or by a better method`;
}
