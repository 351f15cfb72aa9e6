import type * as z from 'zod';
import type { ProblemItem } from '@/openapi/schemas/problem';
import { problemsOfIssues } from './validate';

export interface Itemwise<T> {
  /** The document with its good items only; null where something outside the items is wrong. */
  value: T | null;
  /** For each array, where each good item stood in what was sent. */
  places: Record<string, number[]>;
  problems: ProblemItem[];
}

/**
 * Validates a document whose arrays `keys` hold items that stand or fall alone: a bad item is taken out with its
 * problems, its neighbours stay. `flaws` found before (see strictJson) count like problems of the schema.
 */
export function parseItemwise<S extends z.ZodType>(
  schema: S,
  keys: readonly string[],
  sent: unknown,
  flaws: readonly ProblemItem[],
): Itemwise<z.output<S>> {
  const first = schema.safeParse(sent);
  const problems = [...flaws, ...(first.success ? [] : problemsOfIssues(first.error.issues, sent))];
  if (first.success && problems.length === 0)
    return { value: first.data, places: placesOf(keys, sent, new Map()), problems };

  const bad = new Map<string, Set<number>>();
  for (const { pointer } of problems) {
    const [, key, index] = pointer.split('/');
    if (!keys.includes(key) || !/^\d+$/.test(index ?? '')) return { value: null, places: {}, problems };
    bad.set(key, (bad.get(key) ?? new Set()).add(Number(index)));
  }
  const places = placesOf(keys, sent, bad);
  const good = Object.fromEntries(
    Object.entries(sent as Record<string, unknown>).map(([key, value]) => [
      key,
      Array.isArray(value) && places[key] ? places[key].map((index) => value[index]) : value,
    ]),
  );
  const second = schema.safeParse(good);
  return { value: second.success ? second.data : null, places, problems };
}

function placesOf(keys: readonly string[], sent: unknown, bad: ReadonlyMap<string, ReadonlySet<number>>) {
  const places: Record<string, number[]> = {};
  for (const key of keys) {
    const items = (sent as Record<string, unknown>)[key];
    if (!Array.isArray(items)) continue;
    places[key] = [...items.keys()].filter((index) => !bad.get(key)?.has(index));
  }
  return places;
}
