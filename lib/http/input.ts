import { createHash } from 'node:crypto';
import type * as z from 'zod';
import { bodyText, type RawBody } from '@/lib/formats/body';
import { type Itemwise, parseItemwise } from '@/lib/formats/itemwise';
import { parseStrictJson } from '@/lib/formats/strictJson';
import { problemsOfIssues } from '@/lib/formats/validate';
import { invalid, invalidItems, Problem } from '@/lib/problem';
import { type Body, type Contract, mediaTypesOf } from '@/openapi/contract';
import { problemItem } from '@/openapi/problemItem';

export const DEFAULT_LIMIT = 1024 * 1024;

/** A path parameter that cannot be one names nothing that exists. */
export function readParams(schema: z.ZodObject | undefined, params: Record<string, unknown>): unknown {
  if (!schema) return undefined;
  const parsed = schema.safeParse(params);
  if (!parsed.success) throw new Problem('not_found');
  return parsed.data;
}

export function readQuery(schema: z.ZodObject | undefined, search: URLSearchParams): unknown {
  const query: Record<string, string> = {};
  for (const [name, value] of search) {
    if (Object.hasOwn(query, name)) throw invalid(`?${name}`, 'duplicate_key', `?${name}= stands twice.`);
    // Read as a number it would be 0.
    if (value === '') throw invalid(`?${name}`, 'invalid_value', `?${name}= is empty.`, 'Leave it out.');
    query[name] = value;
  }
  if (!schema) {
    const names = Object.keys(query);
    if (names.length === 0) return undefined;
    throw invalidItems(names.map((name) => problemItem(`?${name}`, 'unknown_field')));
  }
  const parsed = schema.safeParse(query);
  if (parsed.success) return parsed.data;
  const errors = problemsOfIssues(parsed.error.issues, query);
  throw invalidItems(errors.map((error) => ({ ...error, pointer: `?${error.pointer.slice(1)}` })));
}

/** What a verb gets of a body: a value, the good items of one, or text of another kind. */
export type BodyInput =
  | { kind: 'none' }
  | { kind: 'json'; value: unknown }
  | { kind: 'items'; items: Itemwise<unknown> }
  | { kind: 'text'; mediaType: string; text: string };

export async function readInput(body: Body, raw: RawBody): Promise<BodyInput> {
  if (raw.bytes.byteLength === 0) {
    if (body.optional && body.json) return { kind: 'json', value: body.json.parse({}) };
    throw new Problem('body_required');
  }
  const text = await bodyText(raw);
  if (body.text?.includes(raw.mediaType)) return { kind: 'text', mediaType: raw.mediaType, text };
  if (raw.mediaType !== 'application/json' || !body.json) {
    throw new Problem('media_type_unsupported', `This operation takes ${mediaTypesOf(body)}.`);
  }
  const { value, flaws } = parseStrictJson(text);
  if (body.itemwise) return { kind: 'items', items: parseItemwise(body.json, body.itemwise, value, flaws) };
  const parsed = body.json.safeParse(value);
  const errors = [...flaws, ...(parsed.success ? [] : problemsOfIssues(parsed.error.issues, value))];
  if (!parsed.success || errors.length > 0) throw invalidItems(errors);
  return { kind: 'json', value: parsed.data };
}

const IDEMPOTENCY_KEY = /^(?:"([\x21\x23-\x5b\x5d-\x7e ]{1,255})"|([\x21\x23-\x7e][\x21-\x7e]{0,254}))$/;

/** The Idempotency-Key of a POST, bare or as a structured string, with a fingerprint of the whole request. */
export async function readIdempotency(request: Request, operation: Contract, raw: RawBody | null) {
  const header = request.headers.get('idempotency-key');
  if (header === null || operation.method !== 'post') return null;
  const match = IDEMPOTENCY_KEY.exec(header.trim());
  const key = match?.[1] ?? match?.[2];
  if (!key)
    throw invalid(
      'Idempotency-Key',
      'invalid_value',
      'An Idempotency-Key has 1 to 255 printable ASCII characters, and spaces only between double quotes.',
    );
  const { pathname, search } = new URL(request.url);
  const fingerprint = createHash('sha256').update(`${pathname}${search}\n`);
  // Compressed once more, the same body is seldom the same bytes.
  if (raw) fingerprint.update(await raw.content.catch(() => raw.bytes));
  return { key, fingerprint: fingerprint.digest() };
}
