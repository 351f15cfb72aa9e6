import { type ItemProblemCode, REQUEST_PROBLEMS, type RequestProblemCode } from '@/openapi/problemCodes';
import { problemItem } from '@/openapi/problemItem';
import type { Problem as ProblemDocument, ProblemItem } from '@/openapi/schemas/problem';

/** A request that cannot be fulfilled, in words for whoever sent it. */
export class Problem extends Error {
  override readonly name = 'Problem';

  constructor(
    readonly code: RequestProblemCode,
    detail?: string,
    readonly options: { errors?: readonly ProblemItem[]; retryAfter?: number; allow?: string } = {},
  ) {
    super(detail ?? REQUEST_PROBLEMS[code].meaning);
  }

  get status(): number {
    return REQUEST_PROBLEMS[this.code].status;
  }
}

/** A request with something wrong in one place. */
export function invalid(pointer: string, code: ItemProblemCode, detail?: string, fix?: string): Problem {
  return invalidItems([problemItem(pointer, code, detail, fix)]);
}

export function invalidItems(errors: readonly ProblemItem[]): Problem {
  const places = errors.length === 1 ? 'One place' : `${errors.length} places`;
  return new Problem('invalid', `${places} in the request must be mended.`, { errors });
}

/**
 * A problem as it is answered (RFC 9457).
 *
 * @param instance path of what was asked for
 */
export function problemDocument(
  problem: Pick<Problem, 'code' | 'message' | 'options'>,
  requestId: string,
  instance: string,
): ProblemDocument {
  const { status, title } = REQUEST_PROBLEMS[problem.code];
  return {
    type: `/reference/problems/${problem.code}`,
    title,
    status,
    detail: problem.message,
    instance,
    code: problem.code,
    requestId,
    ...(problem.options.errors ? { errors: [...problem.options.errors] } : {}),
  };
}
