import type { Column } from './Table';

/** A cell that no spreadsheet takes for a formula: text that begins like one is quoted as text. */
function cell(value: string | number | null): string {
  if (value === null) return '';
  if (typeof value === 'number') return String(value);
  const safe = /^[=+\-@\t\r]/.test(value) ? `'${value}` : value;
  return /[",\n\r]/.test(safe) ? `"${safe.replaceAll('"', '""')}"` : safe;
}

/** Rows as comma-separated text, units in the header. */
export function csvOf<R>(rows: readonly R[], columns: readonly Column<R>[]): string {
  const written = columns.flatMap(({ name, unit, value }) => (value ? [{ name, unit, value }] : []));
  const header = written.map(({ name, unit }) => cell(unit ? `${name} (${unit})` : name));
  const lines = rows.map((row) => written.map(({ value }) => cell(value(row))));
  return [header, ...lines].map((line) => line.join(',')).join('\r\n');
}

export function save(name: string, content: string): void {
  const url = URL.createObjectURL(new Blob([content], { type: 'text/csv;charset=utf-8' }));
  const link = Object.assign(document.createElement('a'), { href: url, download: name });
  link.click();
  URL.revokeObjectURL(url);
}
