'use client';

import { Fragment, type ReactNode, useMemo, useState } from 'react';
import { Button } from '@/app/ui/form/Button';
import { csvOf, save } from './csv';

export interface Column<R> {
  name: string;
  /** What is sorted by and written to CSV; a column without it is only looked at. */
  value?: (row: R) => string | number | null;
  /** What is shown, where it is more than the value. */
  cell?: (row: R) => ReactNode;
  /** Unit of the values, for the CSV's header. */
  unit?: string;
  figures?: boolean;
  /** Left out on a narrow screen. */
  wide?: boolean;
  /** On a narrow screen it stands under its row, across the whole width. */
  below?: boolean;
}

interface Props<R> {
  caption: string;
  rows: readonly R[];
  columns: readonly Column<R>[];
  keyOf: (row: R) => string;
  /** Name of the CSV file; none is offered without it. */
  file?: string;
  more?: { has: boolean; busy: boolean; read: () => void };
}

/** Rows as they were read, sorted by a press on a head, with the rest of the list a press away. */
export function Table<R>({ caption, rows, columns, keyOf, file, more }: Props<R>) {
  const [order, setOrder] = useState<{ column: number; down: boolean } | null>(null);
  const sorted = useMemo(
    () => (order ? sort(rows, columns[order.column], order.down) : rows),
    [rows, columns, order],
  );
  const press = (column: number) =>
    setOrder((now) =>
      now?.column !== column ? { column, down: false } : now.down ? null : { column, down: true },
    );
  const hide = (column: Column<R>) => (column.wide || column.below ? 'max-md:hidden' : '');
  const show = (column: Column<R>, row: R) => (column.cell ? column.cell(row) : column.value?.(row));
  const below = columns.filter((column) => column.below);
  const line = below.length > 0 ? 'border-rule md:border-b max-md:pb-0.5' : 'border-b border-rule';
  return (
    <div>
      <div className="overflow-x-auto">
        <table className="w-full border-collapse">
          <caption className="sr-only">{caption}</caption>
          <thead>
            <tr>
              {columns.map((column, i) => (
                <th
                  key={column.name}
                  scope="col"
                  aria-sort={order?.column === i ? (order.down ? 'descending' : 'ascending') : undefined}
                  className={`border-b-[1.5px] border-rule-strong px-2.5 pb-2 align-bottom max-md:px-1.5 print:px-1.5 font-head text-[13px] text-ink-second first:pl-0 last:pr-0 ${column.figures ? 'text-right' : 'text-left'} ${hide(column)}`}
                >
                  {column.value ? (
                    <button
                      type="button"
                      onClick={() => press(i)}
                      className="relative cursor-pointer hover:text-ink"
                    >
                      {column.name}
                      <span aria-hidden="true" className="absolute top-0 -right-3 text-mark">
                        {order?.column === i ? (order.down ? '▾' : '▴') : ''}
                      </span>
                    </button>
                  ) : (
                    column.name
                  )}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {sorted.map((row) => (
              <Fragment key={keyOf(row)}>
                <tr className="hover:bg-sheet">
                  {columns.map((column) => (
                    <td
                      key={column.name}
                      className={`px-2.5 py-2.5 align-middle max-md:px-1.5 max-md:text-[13.5px] first:pl-0 last:pr-0 print:px-1.5 print:py-1.5 print:text-[12px] ${line} ${column.figures ? 'text-right font-medium' : ''} ${hide(column)}`}
                    >
                      {show(column, row)}
                    </td>
                  ))}
                </tr>
                {below.map((column) => (
                  <tr key={column.name} className="md:hidden">
                    <td colSpan={columns.length} className="border-b border-rule pb-2.5">
                      {show(column, row)}
                    </td>
                  </tr>
                ))}
              </Fragment>
            ))}
          </tbody>
        </table>
      </div>
      <div className="mt-3 flex items-center justify-between gap-4 text-[13.5px] text-ink-second print:hidden">
        <p role="status">
          {rows.length} shown{more?.has ? ', more to read' : ''}
        </p>
        <div className="flex gap-3">
          {more?.has ? (
            <Button look="plain" small disabled={more.busy} onClick={more.read}>
              {more.busy ? 'Reading…' : 'Show more'}
            </Button>
          ) : null}
          {file && rows.length > 0 ? (
            <Button look="plain" small onClick={() => save(`${file}.csv`, csvOf(sorted, columns))}>
              Save as CSV
            </Button>
          ) : null}
        </div>
      </div>
    </div>
  );
}

function sort<R>(rows: readonly R[], { value }: Column<R>, down: boolean): R[] {
  if (!value) return [...rows];
  const compare = (a: string | number | null, b: string | number | null) => {
    if (a === null || b === null) return a === b ? 0 : a === null ? 1 : -1;
    if (typeof a === 'number' && typeof b === 'number') return a - b;
    return String(a).localeCompare(String(b), 'en', { numeric: true });
  };
  return [...rows].sort((a, b) => (down ? -1 : 1) * compare(value(a), value(b)));
}
