import { parse } from 'csv-parse/sync';
import { CSV_DIALECT, type CsvRecord } from '@/openapi/controlTable';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';

export interface Table {
  /** Cells by column name; `line` counts from 1 with the header. */
  rows: { line: number; cells: Record<string, string> }[];
  problems: ProblemItem[];
  /** There are more rows than were asked for; they are not read. */
  more: boolean;
}

/**
 * Reads comma-separated text with a header row (RFC 4180). A row with the wrong number of cells, or with a NUL, is a
 * problem of its own; the others stand.
 *
 * @param known column names that are taken
 * @param needed those that must be there
 * @param most rows that are read
 */
export function readTable(
  text: string,
  known: readonly string[],
  needed: readonly string[],
  most: number,
): Table {
  let lines: CsvRecord[];
  try {
    // With the header, and one row more to see that there are too many.
    lines = parse(text, { ...CSV_DIALECT, to: most + 2 }) as never;
  } catch (error) {
    const detail =
      error instanceof Error ? error.message.slice(0, 200) : 'The text cannot be read as a table.';
    return { rows: [], problems: [problemItem('/rows', 'row_malformed', detail)], more: false };
  }
  const [header, ...records] = lines;
  const columns = header?.record ?? [];
  const problems = [
    // Beyond as many as are known, one at least is wrong among these.
    ...columns.slice(0, known.length + 1).flatMap((name, i) => headerProblem(name, i, columns, known)),
    ...needed
      .filter((name) => !columns.includes(name))
      .map((name) => problemItem('/rows/1', 'column_missing', `The column ${name} is missing.`)),
  ];
  if (problems.length > 0) return { rows: [], problems, more: false };
  const rows: Table['rows'] = [];
  for (const { record, info } of records.slice(0, most)) {
    const line = info.lines;
    if (record.length !== columns.length) {
      const detail = `Line ${line} has ${record.length} cells, the header ${columns.length}.`;
      problems.push(problemItem(`/rows/${line}`, 'row_malformed', detail));
      continue;
    }
    const forbidden = columns.filter((_, i) => record[i].includes('\u0000'));
    problems.push(...forbidden.map((name) => problemItem(`/rows/${line}/${name}`, 'text_forbidden')));
    if (forbidden.length === 0)
      rows.push({ line, cells: Object.fromEntries(columns.map((name, i) => [name, record[i]])) });
  }
  return { rows, problems, more: records.length > most };
}

function headerProblem(
  name: string,
  index: number,
  columns: readonly string[],
  known: readonly string[],
): ProblemItem[] {
  const pointer = `/rows/1/${index + 1}`;
  if (!known.includes(name)) {
    return [
      problemItem(
        pointer,
        'column_unknown',
        `The column ${JSON.stringify(name)} is none of ${known.join(', ')}.`,
      ),
    ];
  }
  return columns.indexOf(name) < index
    ? [problemItem(pointer, 'name_repeated', `The column ${name} stands twice.`)]
    : [];
}
