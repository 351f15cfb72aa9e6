import { CSV_DIALECT, type CsvRecord } from '@/openapi/controlTable';

/** A file as it will be posted, and its cells as they will be read. */
export interface Preview {
  name: string;
  text: string;
  header: readonly string[];
  /** Line in the file, counted from 1 with the header, and its cells. */
  rows: readonly { line: number; cells: readonly string[] }[];
}

/**
 * Reads a file with the reader that the hub uses itself, so that the lines here are the lines that it answers about.
 *
 * @throws Error when the text is no table
 */
export async function readPreview(file: File): Promise<Preview> {
  const { parse } = await import('csv-parse/browser/esm/sync');
  const text = await file.text();
  const [header, ...rows] = parse(text, CSV_DIALECT) as unknown as CsvRecord[];
  return {
    name: file.name,
    text,
    header: header?.record ?? [],
    rows: rows.map(({ record, info }) => ({ line: info.lines, cells: record })),
  };
}
