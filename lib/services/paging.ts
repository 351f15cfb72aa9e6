import type * as z from 'zod';
import { Problem } from '@/lib/problem';
import { Id } from '@/openapi/schemas/primitives';

export interface Page<T> {
  data: T[];
  nextCursor: string | null;
}

/**
 * Cursor of a list: where it stands, bound to the list and its filters, so that it cannot be used with others.
 *
 * @param list what is listed, with its filters
 */
export function writeCursor(list: readonly unknown[], at: string): string {
  return Buffer.from(JSON.stringify([at, ...list.map((part) => part ?? null)])).toString('base64url');
}

/**
 * Where a cursor stands.
 *
 * @param place what the list is ordered by: a made-up cursor must not reach the database
 * @throws Problem where the cursor belongs to another list or is none
 */
export function readCursor(
  list: readonly unknown[],
  cursor: string | undefined,
  place: z.ZodType<string> = Id,
): string | null {
  if (cursor === undefined) return null;
  try {
    const [at, ...rest] = JSON.parse(Buffer.from(cursor, 'base64url').toString()) as unknown[];
    const parsed = place.safeParse(at);
    if (parsed.success && JSON.stringify(rest) === JSON.stringify(list.map((part) => part ?? null)))
      return parsed.data;
  } catch {
    // Falls through to the problem below.
  }
  throw new Problem('cursor_invalid');
}

/**
 * A page from up to limit + 1 rows: the extra one tells whether more follow.
 *
 * @param key the unique value that the list is ordered by
 */
export function pageOf<R, T>(
  rows: readonly R[],
  limit: number,
  list: readonly unknown[],
  key: (row: R) => string,
  present: (row: R) => T,
): Page<T> {
  const shown = rows.slice(0, limit);
  const last = shown.at(-1);
  return {
    data: shown.map(present),
    nextCursor: rows.length > limit && last !== undefined ? writeCursor(list, key(last)) : null,
  };
}
