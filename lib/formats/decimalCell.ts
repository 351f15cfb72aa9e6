import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';

const DECIMAL = /^[+-]?(?:\d+\.?\d*|\.\d+)$/;

/** A cell of a table as a number; an empty one counts as absent. */
export function decimalCell(
  cell: string | undefined,
  pointer: string,
): { value: number | undefined; problem: ProblemItem | null } {
  if (cell === undefined || cell === '') return { value: undefined, problem: null };
  if (DECIMAL.test(cell)) return { value: Number(cell), problem: null };
  const detail = `${JSON.stringify(cell)} is no decimal number.`;
  return { value: undefined, problem: problemItem(pointer, 'wrong_type', detail) };
}
