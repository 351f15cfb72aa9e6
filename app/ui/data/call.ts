import type * as z from 'zod';
import type { AnswerOf, Contract, ParamsOf, SentOf } from '@/openapi/contract';
import type { Problem } from '@/openapi/schemas/problem';

/** An answer that was no success: the hub's problem document. */
export class Refusal extends Error {
  override readonly name = 'Refusal';

  constructor(
    readonly problem: Problem,
    /** Seconds after which it is worth asking again, where the hub says so. */
    readonly retryAfter: number | null = null,
  ) {
    super(problem.detail);
  }
}

/** The hub could not be reached at all. */
export class Unreachable extends Error {
  override readonly name = 'Unreachable';
}

type SentQuery<C extends Contract> = C['query'] extends z.ZodType ? z.input<C['query']> : undefined;

export interface Call<C extends Contract> {
  params?: ParamsOf<C>;
  query?: Partial<Record<keyof NonNullable<SentQuery<C>>, string | number | undefined>>;
  body?: SentOf<C>;
  /** A body that is not JSON. */
  text?: { media: string; content: string };
}

/** Fills a contract's path; the console is the hub's own client and uses the public API alone. */
export function address(path: string, params: object = {}, query: object = {}): string {
  const filled = path.replace(/\{(\w+)\}/g, (_, name: string) =>
    encodeURIComponent(String((params as Record<string, unknown>)[name])),
  );
  const search = new URLSearchParams();
  for (const [name, value] of Object.entries(query)) {
    if (value !== undefined && value !== '') search.set(name, String(value));
  }
  const text = search.toString();
  return `/api/v1${filled}${text ? `?${text}` : ''}`;
}

/**
 * Calls an operation. Method and path are written where they are used and held to the contract by its type, so that
 * no contract travels to the browser.
 */
export async function call<C extends Contract>(
  method: Uppercase<C['method']>,
  path: C['path'],
  { params, query, body, text }: Call<C> = {},
): Promise<AnswerOf<C>> {
  const headers: Record<string, string> = {};
  if (body !== undefined) headers['Content-Type'] = 'application/json';
  if (text) headers['Content-Type'] = text.media;
  let response: Response;
  try {
    response = await fetch(address(path, params ?? {}, query ?? {}), {
      method,
      headers,
      body: text ? text.content : body === undefined ? undefined : JSON.stringify(body),
    });
  } catch {
    throw new Unreachable('The hub cannot be reached.');
  }
  if (response.status === 204) return undefined as AnswerOf<C>;
  const answer: unknown = await response.json().catch(() => null);
  if (response.ok) return answer as AnswerOf<C>;
  const wait = response.headers.get('retry-after');
  throw new Refusal(
    isProblem(answer) ? answer : unknownProblem(response),
    wait === null ? null : Number(wait),
  );
}

function isProblem(answer: unknown): answer is Problem {
  return typeof answer === 'object' && answer !== null && 'code' in answer && 'requestId' in answer;
}

function unknownProblem(response: Response): Problem {
  return {
    type: 'about:blank',
    title: 'The hub did not answer as expected',
    status: response.status,
    detail: `It answered with status ${response.status}.`,
    instance: response.url,
    code: 'internal',
    requestId: response.headers.get('request-id') ?? 'unknown',
  };
}
