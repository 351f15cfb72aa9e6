import { sha256 } from '@/lib/access/secrets';
import type { LengthUnit } from '@/lib/compute/units/table';
import { decimalCell } from '@/lib/formats/decimalCell';
import { parseItemwise } from '@/lib/formats/itemwise';
import { readTable } from '@/lib/formats/table';
import { invalid, invalidItems } from '@/lib/problem';
import { LEVEL_BOOK_COLUMNS, LEVEL_BOOK_NEEDED, MAX_LEVEL_SIGHTS } from '@/openapi/levelBookTable';
import type { ProblemItem } from '@/openapi/schemas/problem';
import { UPLOAD_KINDS, UploadDocument } from '@/openapi/schemas/upload';
import type { ReadDocument } from './document';

/** What stands beside a level book in the address. */
export interface BookQuery {
  length?: LengthUnit;
  clientId?: string;
  instrument?: string;
  observedAt?: string;
  confirmUnits?: 'true' | 'false';
}

/**
 * A level book as a table, as the upload of one run that it stands for: the run begins on the first line's point and
 * has the client id of the upload. Whatever is wrong points to rows and columns of the table.
 *
 * @throws Problem where the table cannot be read, or the address lacks what a document would say
 */
export function readLevelBook(text: string, query: BookQuery): ReadDocument {
  const { length, clientId, instrument, observedAt } = query;
  if (!length) throw invalid('?length', 'units_required', 'A level book needs ?length=m, ft or ftUS.');
  if (!clientId) throw invalid('?clientId', 'required', 'A level book needs ?clientId=, an id of your own.');
  const table = readTable(text, LEVEL_BOOK_COLUMNS, LEVEL_BOOK_NEEDED, MAX_LEVEL_SIGHTS);
  if (table.more)
    throw invalid('/rows', 'invalid_value', `A level book has at most ${MAX_LEVEL_SIGHTS} lines.`);
  if (table.rows.length === 0 && table.problems.length === 0)
    throw invalid('/rows', 'required', 'There is no line under the header.');
  const cells = table.rows.flatMap(({ line, cells: row }) =>
    LEVEL_BOOK_COLUMNS.slice(1).map((column) => decimalCell(row[column], `/rows/${line}/${column}`)),
  );
  const problems = [...table.problems, ...cells.flatMap(({ problem }) => problem ?? [])];
  if (problems.length > 0) throw invalidItems(problems);
  const width = LEVEL_BOOK_COLUMNS.length - 1;
  const sights = table.rows.map(({ cells: row }, i) => {
    const numbers = LEVEL_BOOK_COLUMNS.slice(1).map((column, k) => [column, cells[i * width + k].value]);
    return { point: row.point, ...Object.fromEntries(numbers.filter(([, value]) => value !== undefined)) };
  });
  const lines = table.rows.map(({ line }) => line);
  const run = { clientId, from: table.rows[0]?.cells.point ?? '', instrument, observedAt, sights };
  const sent = {
    clientId,
    units: { length },
    ...(query.confirmUnits === undefined ? {} : { confirmUnits: query.confirmUnits === 'true' }),
    levelRuns: [Object.fromEntries(Object.entries(run).filter(([, value]) => value !== undefined))],
  };
  const read = parseItemwise(UploadDocument, UPLOAD_KINDS, sent, []);
  return {
    ...read,
    // The start is the first line's point, where a name that cannot be used is told already.
    problems: read.problems.filter(({ pointer, code }) => pointer !== FROM || code !== 'name_invalid'),
    asSent: (item) => inTable(item, lines),
    contentSha256: sha256(JSON.stringify(sent)),
  };
}

const FROM = '/levelRuns/0/from';
const SIGHT = /^\/levelRuns\/0\/sights(?:\/(\d+)(\/\w+)?)?$/;
const BESIDE = /^\/levelRuns\/0\/(clientId|instrument|observedAt)$/;

/** A problem of the document where it stands in the table or in the address. */
function inTable(item: ProblemItem, lines: readonly number[]): ProblemItem {
  const beside = BESIDE.exec(item.pointer);
  if (beside) return { ...item, pointer: `?${beside[1]}` };
  if (item.pointer === '/units/length') return { ...item, pointer: '?length' };
  if (item.pointer === FROM) return { ...item, pointer: `/rows/${lines[0]}/point` };
  const sight = SIGHT.exec(item.pointer);
  if (!sight) return item;
  return { ...item, pointer: sight[1] ? `/rows/${lines[Number(sight[1])]}${sight[2] ?? ''}` : '/rows' };
}
