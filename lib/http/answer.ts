import { type Problem, problemDocument } from '@/lib/problem';

/** An answer with a status or headers of its own; verbs that answer plainly need none. */
export class Reply {
  constructor(
    readonly status: number,
    readonly body: unknown,
    readonly headers: Record<string, string> = {},
  ) {}
}

/** Bytes as they are. */
export class Attachment {
  constructor(
    readonly bytes: Uint8Array,
    readonly fileName: string,
  ) {}
}

const COMMON = { 'Cache-Control': 'no-store', 'X-Content-Type-Options': 'nosniff' };

export function jsonResponse(
  status: number,
  text: string | null,
  requestId: string,
  headers: Record<string, string> = {},
) {
  // As bytes: a string would be copied twice more on its way through the web streams.
  return new Response(text === null ? null : Buffer.from(text), {
    status,
    headers: {
      ...COMMON,
      ...(text === null ? {} : { 'Content-Type': 'application/json' }),
      'Request-Id': requestId,
      ...headers,
    },
  });
}

/** No browser shows what others sent in: it is saved, sandboxed, never sniffed. */
export function attachmentResponse({ bytes, fileName }: Attachment, requestId: string): Response {
  return new Response(bytes as Uint8Array<ArrayBuffer>, {
    status: 200,
    headers: {
      ...COMMON,
      'Content-Type': 'application/octet-stream',
      'Content-Disposition': `attachment; filename="${fileName}"`,
      'Content-Security-Policy': "default-src 'none'; sandbox",
      'Request-Id': requestId,
    },
  });
}

/** Headers that belong to a problem's status. */
export function problemHeaders(problem: Problem, requestId: string): Record<string, string> {
  const { retryAfter, allow } = problem.options;
  return {
    ...COMMON,
    'Content-Type': 'application/problem+json',
    'Request-Id': requestId,
    ...(retryAfter === undefined ? {} : { 'Retry-After': String(retryAfter) }),
    ...(allow === undefined ? {} : { Allow: allow }),
    ...(problem.status === 401 ? { 'WWW-Authenticate': 'Bearer realm="hubtack"' } : {}),
    ...(problem.code === 'media_type_unsupported' ? { 'Accept-Encoding': 'gzip' } : {}),
  };
}

export function problemResponse(problem: Problem, requestId: string, instance: string): Response {
  return new Response(JSON.stringify(problemDocument(problem, requestId, instance)), {
    status: problem.status,
    headers: problemHeaders(problem, requestId),
  });
}
