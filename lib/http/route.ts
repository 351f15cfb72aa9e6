import { Problem } from '@/lib/problem';
import { systemRuntime as runtime } from '@/lib/runtime';
import type { Method } from '@/openapi/contract';
import { problemResponse } from './answer';
import type { Handler } from './endpoint';

type Export = 'GET' | 'HEAD' | 'POST' | 'PUT' | 'PATCH' | 'DELETE' | 'OPTIONS';

/**
 * The exports of a route file: its operations, and for every other method a problem with `Allow`, where the
 * framework would answer an empty 405.
 */
export function route(operations: Partial<Record<Method, Handler>>): Record<Export, Handler> {
  const names = Object.keys(operations).map((method) => method.toUpperCase());
  const allow = [...names, ...(operations.get ? ['HEAD'] : []), 'OPTIONS'].join(', ');
  const refuse: Handler = async (request) => {
    const problem = new Problem('method_not_allowed', `This path takes ${allow}.`, { allow });
    return problemResponse(problem, runtime.uuid(), new URL(request.url).pathname);
  };
  const tell: Handler = async () => new Response(null, { status: 204, headers: { Allow: allow } });
  return {
    GET: operations.get ?? refuse,
    HEAD: operations.get ?? refuse,
    POST: operations.post ?? refuse,
    PUT: refuse,
    PATCH: operations.patch ?? refuse,
    DELETE: operations.delete ?? refuse,
    OPTIONS: tell,
  };
}

/** The exports of a path that is none. */
export function unknownPath(): Record<Export, Handler> {
  const refuse: Handler = async (request) => {
    const { pathname } = new URL(request.url);
    return problemResponse(new Problem('not_found', 'There is no such path.'), runtime.uuid(), pathname);
  };
  return {
    GET: refuse,
    HEAD: refuse,
    POST: refuse,
    PUT: refuse,
    PATCH: refuse,
    DELETE: refuse,
    OPTIONS: refuse,
  };
}
