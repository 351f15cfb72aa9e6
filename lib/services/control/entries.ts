import type * as z from 'zod';
import type { LengthUnit } from '@/lib/compute/units/table';
import { decimalCell } from '@/lib/formats/decimalCell';
import type { Itemwise } from '@/lib/formats/itemwise';
import { readTable, type Table } from '@/lib/formats/table';
import { problemsOfIssues } from '@/lib/formats/validate';
import { invalid, invalidItems, Problem } from '@/lib/problem';
import { CONTROL_COLUMNS, CONTROL_NEEDED } from '@/openapi/controlTable';
import { problemItem } from '@/openapi/problemItem';
import { ControlPointInput, type ControlSubmission, MAX_CONTROL_POINTS } from '@/openapi/schemas/control';
import type { ProblemItem } from '@/openapi/schemas/problem';

/** A point that was sent in, and where it stood. */
export interface Entry {
  pointer: string;
  point: z.output<typeof ControlPointInput>;
}

export interface Entries {
  unit: LengthUnit;
  unitPointer: string;
  confirmUnits: boolean | undefined;
  entries: Entry[];
  refused: ProblemItem[];
}

/** The points of a JSON submission. */
function entriesOfJson(items: Itemwise<z.output<typeof ControlSubmission>>): Entries {
  const { value, places, problems } = items;
  if (value === null) {
    const pointsAlone = problems.every(({ pointer }) => /^\/points\/\d/.test(pointer));
    throw pointsAlone
      ? new Problem('nothing_accepted', undefined, { errors: problems })
      : invalidItems(problems);
  }
  return {
    unit: value.units.length,
    unitPointer: '/units/length',
    confirmUnits: value.confirmUnits,
    entries: value.points.map((point, i) => ({ pointer: `/points/${places.points[i]}`, point })),
    refused: problems,
  };
}

/** The points of a CSV submission, a row each; empty cells count as absent. */
function entriesOfCsv(text: string, unit: LengthUnit | undefined, confirmUnits: boolean): Entries {
  if (!unit) throw invalid('?length', 'units_required', 'A CSV body needs ?length=m, ft or ftUS.');
  const table = readTable(text, CONTROL_COLUMNS, CONTROL_NEEDED, MAX_CONTROL_POINTS);
  if (table.more)
    throw invalid('/rows', 'invalid_value', `The table must have at most ${MAX_CONTROL_POINTS} rows.`);
  const refused = [...table.problems];
  const entries: Entry[] = [];
  for (const row of table.rows) {
    const pointer = `/rows/${row.line}`;
    const { value, problems } = pointOfRow(row, pointer);
    const parsed = problems.length === 0 ? ControlPointInput.safeParse(value) : null;
    if (parsed?.success) entries.push({ pointer, point: parsed.data });
    else if (!parsed) refused.push(...problems);
    else {
      const issues = problemsOfIssues(parsed.error.issues, value);
      refused.push(...issues.map((issue) => ({ ...issue, pointer: `${pointer}${issue.pointer}` })));
    }
  }
  if (entries.length === 0 && refused.length === 0) {
    refused.push(problemItem('/rows', 'required', 'There is no row under the header.'));
  }
  return { unit, unitPointer: '?length', confirmUnits, entries, refused };
}

function pointOfRow({ cells }: Table['rows'][number], pointer: string) {
  const problems: ProblemItem[] = [];
  const number = (column: string): number | undefined => {
    const { value, problem } = decimalCell(cells[column], `${pointer}/${column}`);
    if (problem) problems.push(problem);
    return value;
  };
  const [horizontal, vertical] = [number('sigmaHorizontal'), number('sigmaVertical')];
  const sigma = horizontal === undefined && vertical === undefined ? undefined : { horizontal, vertical };
  const value = {
    name: cells.name,
    easting: number('easting'),
    northing: number('northing'),
    elevation: number('elevation'),
    ...(sigma ? { sigma } : {}),
    ...(cells.kind ? { kind: cells.kind } : {}),
    ...(cells.description ? { description: cells.description } : {}),
  };
  return { value, problems };
}

/** What a control submission brought, as items of JSON or as text. */
type Submitted =
  | { kind: 'items'; items: Itemwise<unknown> }
  | { kind: 'text'; text: string }
  | { kind: 'json' | 'none' };

/** Reads the points of a submission when they are wanted: after the project is known. */
export function entriesOf(
  body: Submitted,
  query: { length?: LengthUnit; confirmUnits?: 'true' | 'false' },
): () => Entries {
  return () => {
    if (body.kind === 'text') return entriesOfCsv(body.text, query.length, query.confirmUnits === 'true');
    if (body.kind === 'items')
      return entriesOfJson(body.items as Itemwise<z.output<typeof ControlSubmission>>);
    throw new Problem('body_required');
  };
}
