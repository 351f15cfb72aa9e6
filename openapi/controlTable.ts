/** The table in which control comes: its columns, and the dialect in which hub and console read it (RFC 4180). */
export const CONTROL_COLUMNS = [
  'name',
  'easting',
  'northing',
  'elevation',
  'sigmaHorizontal',
  'sigmaVertical',
  'kind',
  'description',
] as const;

export const CONTROL_NEEDED = ['name', 'easting', 'northing'] as const;

export const CSV_DIALECT = {
  bom: true,
  // All of them at once: sheets are pasted together from machines of either kind.
  record_delimiter: ['\r\n', '\n', '\r'],
  relax_column_count: true,
  skip_empty_lines: true,
  trim: true,
  info: true,
};

/** What the reader answers under this dialect. */
export interface CsvRecord {
  record: string[];
  info: { lines: number };
}
