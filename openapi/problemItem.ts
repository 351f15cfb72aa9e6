import { ITEM_PROBLEMS, type ItemProblemCode } from './problemCodes';
import type { ProblemItem } from './schemas/problem';

/** One place and what is wrong with it; detail and fix come from the code where they are not given. */
export function problemItem(
  pointer: string,
  code: ItemProblemCode,
  detail?: string,
  fix?: string,
): ProblemItem {
  return {
    pointer: keepable(pointer),
    code,
    detail: keepable(detail ?? ITEM_PROBLEMS[code].meaning),
    fix: fix ?? ITEM_PROBLEMS[code].fix,
  };
}

/** JSON pointer of a path (RFC 6901). */
export function pointerTo(path: readonly PropertyKey[]): string {
  return path.map((part) => `/${String(part).replaceAll('~', '~0').replaceAll('/', '~1')}`).join('');
}

/** Text that a database and a JSON document can hold: no NUL, no half surrogate pair. */
function keepable(text: string): string {
  return text.slice(0, 1000).toWellFormed().replaceAll('\u0000', '\uFFFD');
}
