import { tenantTransaction } from '@/db/tenant';
import { type Caller, mayUseProject } from '@/lib/access/actor';
import { getConfig } from '@/lib/config';
import type { RawBody } from '@/lib/formats/body';
import { log } from '@/lib/log/log';
import { Problem } from '@/lib/problem';
import { systemRuntime as runtime, stopwatch } from '@/lib/runtime';
import { answerOnce } from '@/lib/services/answerOnce';
import type { CallerContext, PublicContext, VerbContext } from '@/lib/services/context';
import {
  type AnswerOf,
  type Contract,
  type JsonOf,
  type ParamsOf,
  type QueryOf,
  successStatus,
} from '@/openapi/contract';
import type { Scope } from '@/openapi/scopes';
import { Attachment, attachmentResponse, jsonResponse, problemResponse, Reply } from './answer';
import { authenticate, requireSameOrigin } from './authenticate';
import { checkAnswer } from './checkAnswer';
import { loggable, problemOf } from './faults';
import { type BodyInput, DEFAULT_LIMIT, readIdempotency, readInput, readParams, readQuery } from './input';
import { readBody } from './readBody';

export const ADDRESS_HEADER = 'x-hubtack-address';

export type Handler = (
  request: Request,
  context: { params: Promise<Record<string, unknown>> },
) => Promise<Response>;

/** What every verb gets of its request, as the contract says. */
export interface Input<C extends Contract> {
  params: ParamsOf<C>;
  query: QueryOf<C>;
  /** The JSON body. */
  body: JsonOf<C>;
}

type Answered<C extends Contract> = Promise<AnswerOf<C> | Reply | Attachment>;

/**
 * An operation on an organization's own things: the caller is known, allowed and valid, and the verb runs in one
 * transaction, with its answer kept under the Idempotency-Key if there is one.
 */
export function endpoint<C extends Contract>(
  operation: C,
  verb: (context: VerbContext, input: Input<C>) => Answered<C>,
): Handler {
  return bodyEndpoint(operation, (context, input, body) =>
    verb(context, { ...input, body: (body.kind === 'json' ? body.value : undefined) as JsonOf<C> }),
  );
}

/** The same for a body that is not one JSON value: items that stand or fall alone, or text. */
export function bodyEndpoint<C extends Contract>(
  operation: C,
  verb: (context: VerbContext, input: Omit<Input<C>, 'body'>, body: BodyInput) => Answered<C>,
): Handler {
  return handler(operation, async (request, base, params) => {
    const caller = await admit(request, operation, base);
    const input = { params: readParams(operation.params, params), query: readQueryOf(request, operation) };
    requireProject(caller, input.params);
    const raw = operation.body ? await readBody(request, operation.body.limit ?? DEFAULT_LIMIT) : null;
    const body = raw && operation.body ? await readInput(operation.body, raw) : ({ kind: 'none' } as const);
    const idempotency = readIdempotency(request, operation, raw?.bytes ?? null);
    const kept = await tenantTransaction(caller.organizationId, async (tenant) => {
      const context = { ...base, caller, idempotency, tenant };
      let plain: Reply | Attachment | undefined;
      const produce = async () => {
        const answer = await verb(context, input as Omit<Input<C>, 'body'>, body);
        plain =
          answer instanceof Reply || answer instanceof Attachment
            ? answer
            : new Reply(successStatus(operation), answer);
        return plain instanceof Reply
          ? { status: plain.status, text: replyText(operation, plain) ?? '' }
          : { status: 200, text: '' };
      };
      const answer = await answerOnce(context, operation.id, produce, operation.secret);
      return { ...answer, plain };
    });
    if (kept.plain instanceof Attachment) return attachmentResponse(kept.plain, base.requestId);
    const headers = { ...kept.plain?.headers, ...(kept.replayed ? { 'Idempotency-Replayed': 'true' } : {}) };
    return jsonResponse(kept.status, kept.text === '' ? null : kept.text, base.requestId, headers);
  });
}

/** An operation whose verb reads the bytes itself and runs its own transactions, so that they are never lost. */
export function rawEndpoint<C extends Contract>(
  operation: C,
  verb: (
    context: CallerContext,
    input: Omit<Input<C>, 'body'> & { raw: RawBody },
  ) => Promise<{ status: number; text: string; replayed: boolean }>,
): Handler {
  return handler(operation, async (request, base, params) => {
    const caller = await admit(request, operation, base);
    const input = { params: readParams(operation.params, params), query: readQueryOf(request, operation) };
    requireProject(caller, input.params);
    const raw = await readBody(request, operation.body?.limit ?? DEFAULT_LIMIT);
    const idempotency = readIdempotency(request, operation, raw.bytes);
    const context = { ...base, caller, idempotency };
    const answer = await verb(context, { ...(input as Omit<Input<C>, 'body'>), raw });
    if (getConfig().validateAnswers) checkAnswer(operation, answer.status, JSON.parse(answer.text));
    const headers: Record<string, string> = answer.replayed ? { 'Idempotency-Replayed': 'true' } : {};
    return jsonResponse(answer.status, answer.text, base.requestId, headers);
  });
}

/** An operation that anybody may ask for. */
export function publicEndpoint<C extends Contract>(
  operation: C,
  verb: (context: PublicContext, input: Input<C>) => Answered<C>,
): Handler {
  return handler(operation, async (request, base, params) => {
    if (request.method !== 'GET' && request.method !== 'HEAD') requireSameOrigin(request, false);
    const input = { params: readParams(operation.params, params), query: readQueryOf(request, operation) };
    const raw = operation.body ? await readBody(request, operation.body.limit ?? DEFAULT_LIMIT) : null;
    const body = raw && operation.body ? await readInput(operation.body, raw) : null;
    const answer = await verb(base, {
      ...input,
      body: body?.kind === 'json' ? body.value : undefined,
    } as Input<C>);
    const reply = answer instanceof Reply ? answer : new Reply(successStatus(operation), answer);
    return jsonResponse(reply.status, replyText(operation, reply), base.requestId, reply.headers);
  });
}

function handler(
  operation: Contract,
  work: (request: Request, base: PublicContext & Noted, params: Record<string, unknown>) => Promise<Response>,
): Handler {
  return async (request, { params }) => {
    const elapsed = stopwatch();
    const base: PublicContext & Noted = {
      runtime,
      requestId: runtime.uuid(),
      address: request.headers.get(ADDRESS_HEADER) ?? 'unknown',
      noted: {},
    };
    let response: Response;
    try {
      response = await work(request, base, await params);
    } catch (error) {
      const problem = problemOf(error);
      if (problem.status >= 500) log().error({ id: base.requestId, ...loggable(error) }, 'request failed');
      response = problemResponse(problem, base.requestId, new URL(request.url).pathname);
    }
    const { method, path } = operation;
    log().info(
      { id: base.requestId, method, route: path, status: response.status, ms: elapsed(), ...base.noted },
      'request',
    );
    return response;
  };
}

/** What the log line of a request will say of its caller. */
interface Noted {
  noted: { actor?: string; organization?: string };
}

async function admit(request: Request, operation: Contract, base: PublicContext & Noted): Promise<Caller> {
  const caller = await authenticate(request, runtime.now());
  base.noted = { actor: `${caller.kind}:${caller.name}`, organization: caller.organizationId };
  const scope = operation.access;
  if (scope !== 'signedIn' && !caller.scopes.includes(scope as Scope)) {
    const who = caller.kind === 'key' ? 'This key' : `The role ${caller.role}`;
    throw new Problem('forbidden', `${who} lacks the scope ${scope}.`);
  }
  return caller;
}

/** A project that a key is not for answers exactly like one that does not exist. */
function requireProject(caller: Caller, params: unknown): void {
  const projectId = (params as { projectId?: string } | undefined)?.projectId;
  if (projectId !== undefined && !mayUseProject(caller, projectId)) throw new Problem('not_found');
}

function readQueryOf(request: Request, operation: Contract): unknown {
  return readQuery(operation.query, new URL(request.url).searchParams);
}

function replyText(operation: Contract, reply: Reply): string | null {
  if (reply.body === undefined) return null;
  if (getConfig().validateAnswers) checkAnswer(operation, reply.status, reply.body);
  return JSON.stringify(reply.body);
}
