import type { ProblemItem } from '@/openapi/schemas/problem';

/** What a person does in the form where a program would repeat its request. */
const FIX: Partial<Record<string, string>> = {
  control_point_exists: 'Drop the file again and tick “Make new versions”, if that is meant.',
  wrong_type: 'Write a plain number, such as 1240.113.',
};

/** What is wrong with a row and how to mend it; the column first, where it is one column's. */
export function sayProblem({ pointer, code, detail, fix }: ProblemItem): string {
  const column = parts(pointer).slice(2);
  const place = column.length > 0 ? `Column ${column.join(' ')}: ` : '';
  return `${place}${detail} ${FIX[code] ?? fix}`;
}

/** The same with its row, for where no row stands beside it. */
export function sayProblemOfFile(problem: ProblemItem): string {
  const [table, row] = parts(problem.pointer);
  if (table !== 'rows' || row === undefined) return sayProblem(problem);
  return `${row === '1' ? 'Header' : `Row ${row}`}. ${sayProblem(problem)}`;
}

function parts(pointer: string): string[] {
  return pointer.split('/').slice(1);
}
