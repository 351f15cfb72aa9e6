import { databaseFault } from '@/db/faults';
import type { Tenant } from '@/db/tenant';
import { type Caller, mayUseProject } from '@/lib/access/actor';
import { callerTransaction } from '@/lib/access/identify';
import { getConfig } from '@/lib/config';
import type { RawBody } from '@/lib/formats/body';
import { log } from '@/lib/log/log';
import { loggable } from '@/lib/log/loggable';
import { Problem } from '@/lib/problem';
import { systemRuntime as runtime, stopwatch } from '@/lib/runtime';
import { answerOnce } from '@/lib/services/answerOnce';
import type { CallerContext, PublicContext, VerbContext } from '@/lib/services/context';
import {
  type AnswerOf,
  type Contract,
  type JsonOf,
  mediaTypesOf,
  type ParamsOf,
  type QueryOf,
  successStatus,
} from '@/openapi/contract';
import { Job } from '@/openapi/schemas/job';
import type { Scope } from '@/openapi/scopes';
import { Attachment, attachmentResponse, jsonResponse, problemResponse, Reply } from './answer';
import { readCredential, requireSameOrigin } from './authenticate';
import { checkAnswer } from './checkAnswer';
import { problemOf } from './faults';
import { type BodyInput, DEFAULT_LIMIT, readIdempotency, readInput, readParams, readQuery } from './input';
import { jobHeaders } from './jobs';
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

/** A request as it arrived: read, but not yet known to come from anybody. */
export interface Arrived<C extends Contract> {
  params: ParamsOf<C>;
  query: QueryOf<C>;
  raw: RawBody | null;
  idempotency: CallerContext['idempotency'];
}

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
  return callerHandler(operation, {
    prepare: async ({ raw }): Promise<BodyInput> =>
      raw && operation.body ? readInput(operation.body, raw) : { kind: 'none' },
    run: async (context, { params, query }, body) => {
      let answer: Reply | Attachment | undefined;
      const produce = async () => {
        const given = await verb(context, { params, query }, body);
        answer =
          given instanceof Reply || given instanceof Attachment
            ? given
            : new Reply(successStatus(operation), given);
        if (answer instanceof Attachment) return { status: 200, text: '' };
        return { status: answer.status, text: replyText(operation, answer) ?? '' };
      };
      const { status, text, replayed } = await answerOnce(context, operation.id, produce, operation.secret);
      if (answer instanceof Attachment) return attachmentResponse(answer, context.requestId);
      const isJob = operation.answers[status]?.json === Job;
      const headers = {
        ...answer?.headers,
        ...(isJob ? jobHeaders(status, JSON.parse(text), context.runtime.now()) : {}),
        ...(replayed ? REPLAYED : {}),
      };
      return jsonResponse(status, text === '' ? null : text, context.requestId, headers);
    },
  });
}

const REPLAYED = { 'Idempotency-Replayed': 'true' };

/**
 * A reading operation that takes long to compute: the verb reads, and what it gives is called when its transaction has
 * ended, so that no connection waits for it.
 */
export function computedEndpoint<C extends Contract>(
  operation: C,
  verb: (context: VerbContext, input: Omit<Input<C>, 'body'>) => Promise<() => AnswerOf<C>>,
): Handler {
  return callerHandler(operation, {
    prepare: async () => undefined,
    run: async (context, { params, query }) => {
      const compute = await verb(context, { params, query });
      return () => {
        const reply = new Reply(successStatus(operation), compute());
        return jsonResponse(reply.status, replyText(operation, reply), context.requestId);
      };
    },
  });
}

/** An operation that keeps the bytes it gets whatever becomes of them. */
export interface RawOperation<C extends Contract, P, A> {
  /** Reads the bytes; what is wrong with them is part of the answer, not thrown. */
  prepare(raw: RawBody, input: Omit<Input<C>, 'body'>): Promise<P>;
  /** Reads ahead of knowing the caller, in the same packet; not looked at until the caller is let in. */
  ahead(tenant: Tenant, input: Omit<Input<C>, 'body'>, prepared: P): Promise<A> | null;
  run(
    context: VerbContext,
    input: Omit<Input<C>, 'body'> & { raw: RawBody },
    prepared: P,
    ahead: Promise<A> | null,
  ): Promise<{ status: number; text: string; replayed: boolean }>;
  /** Keeps what was refused, after the rollback. */
  refused(
    context: CallerContext,
    input: Omit<Input<C>, 'body'> & { raw: RawBody },
    prepared: P,
    problem: Problem,
  ): Promise<void>;
}

export function rawEndpoint<C extends Contract, P, A>(operation: C, steps: RawOperation<C, P, A>): Handler {
  const withRaw = ({ params, query, raw }: Arrived<C>) => ({ params, query, raw: raw! });
  return callerHandler(operation, {
    prepare: ({ raw, params, query }) => steps.prepare(raw!, { params, query }),
    ahead: (tenant, arrived, prepared) => steps.ahead(tenant, arrived, prepared),
    run: async (context, arrived, prepared, ahead) => {
      const answer = await steps.run(context, withRaw(arrived), prepared, ahead);
      if (getConfig().validateAnswers) checkAnswer(operation, answer.status, JSON.parse(answer.text));
      return jsonResponse(answer.status, answer.text, context.requestId, answer.replayed ? REPLAYED : {});
    },
    refused: (context, arrived, prepared, problem) =>
      steps.refused(context, withRaw(arrived), prepared, problem),
  });
}

interface CallerSteps<C extends Contract, P, A> {
  prepare(arrived: Arrived<C>): Promise<P>;
  ahead?(tenant: Tenant, arrived: Arrived<C>, prepared: P): Promise<A> | null;
  /** Answers, or says how to when the transaction has ended. */
  run(
    context: VerbContext,
    arrived: Arrived<C>,
    prepared: P,
    ahead: Promise<A> | null,
  ): Promise<Response | (() => Response)>;
  refused?(context: CallerContext, arrived: Arrived<C>, prepared: P, problem: Problem): Promise<void>;
}

/** Bodies up to this size are read from anybody; larger and compressed ones only from somebody who may send them. */
const SMALL_BODY = 16_384;

function isSmall({ headers }: Request): boolean {
  return (
    !headers.has('content-encoding') && Number(headers.get('content-length') ?? Number.NaN) <= SMALL_BODY
  );
}

/** Each time one of those that write the same succeeds, and the pool lets no more than eight try at once. */
const MAX_REPEATS = 7;

/**
 * One request of a caller. What arrived is read first, but whatever is wrong with it waits until the caller is known
 * and allowed; then identification, the verb's reading and its writing share one transaction.
 */
function callerHandler<C extends Contract, P, A>(operation: C, steps: CallerSteps<C, P, A>): Handler {
  return handler(operation, async (request, base, pathParams) => {
    const now = runtime.now();
    const shown = await readCredential(request, now);
    if (operation.body && !isSmall(request)) {
      await callerTransaction(shown, now, async (_, identified) => admit(await identified, operation, base));
    }
    const read = await attempt(async () => {
      const arrived = await readArrived(request, operation, pathParams);
      return { arrived, prepared: await steps.prepare(arrived) };
    });
    let known: CallerContext | undefined;
    const once = () =>
      callerTransaction(shown, now, async (tenant, identified) => {
        const ahead =
          'value' in read ? (steps.ahead?.(tenant, read.value.arrived, read.value.prepared) ?? null) : null;
        ahead?.catch(() => undefined);
        const caller = admit(await identified, operation, base);
        if ('failure' in read) throw read.failure;
        const { arrived, prepared } = read.value;
        requireProject(caller, arrived.params);
        known = { ...base, caller, idempotency: arrived.idempotency };
        return steps.run({ ...known, tenant }, arrived, prepared, ahead);
      });
    for (let repeats = 0; ; repeats++) {
      try {
        const answer = await once();
        return typeof answer === 'function' ? answer() : answer;
      } catch (error) {
        // Others wrote the same at the same moment; what they wrote is seen now.
        if (databaseFault(error)?.kind === 'unique' && repeats < MAX_REPEATS) continue;
        const problem = problemOf(error);
        if (problem.status < 500 && known && 'value' in read) {
          await steps.refused?.(known, read.value.arrived, read.value.prepared, problem);
        }
        throw error;
      }
    }
  });
}

async function attempt<T>(work: () => Promise<T>): Promise<{ value: T } | { failure: unknown }> {
  try {
    return { value: await work() };
  } catch (failure) {
    return { failure };
  }
}

async function readArrived<C extends Contract>(
  request: Request,
  operation: C,
  pathParams: Record<string, unknown>,
): Promise<Arrived<C>> {
  const params = readParams(operation.params, pathParams) as ParamsOf<C>;
  const query = readQueryOf(request, operation) as QueryOf<C>;
  const raw = operation.body ? await readBody(request, operation.body.limit ?? DEFAULT_LIMIT) : null;
  return { params, query, raw, idempotency: await readIdempotency(request, operation, raw) };
}

/** An operation that anybody may ask for. */
export function publicEndpoint<C extends Contract>(
  operation: C,
  verb: (context: PublicContext, input: Input<C>) => Answered<C>,
): Handler {
  return handler(operation, async (request, base, params) => {
    if (request.method !== 'GET' && request.method !== 'HEAD') requireSameOrigin(request, false);
    const input = { params: readParams(operation.params, params), query: readQueryOf(request, operation) };
    const body = operation.body ? await readInput(operation.body, await readBody(request, SMALL_BODY)) : null;
    const answer = await verb(base, {
      ...input,
      body: body?.kind === 'json' ? body.value : undefined,
    } as Input<C>);
    const reply = answer instanceof Reply ? answer : new Reply(successStatus(operation), answer);
    return jsonResponse(reply.status, replyText(operation, reply), base.requestId, reply.headers);
  });
}

export function handler(
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
      if (problem.code === 'media_type_unsupported' && operation.body)
        response.headers.set('Accept', mediaTypesOf(operation.body));
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

/** Notes who asks and refuses who may not. */
export function admit(caller: Caller, operation: Contract, base: Noted): Caller {
  base.noted = { actor: `${caller.kind}:${caller.name}`, organization: caller.organizationId };
  const scope = operation.access;
  if (scope !== 'signedIn' && !caller.scopes.includes(scope as Scope)) {
    const who = caller.kind === 'key' ? 'This key' : `The role ${caller.role}`;
    throw new Problem('forbidden', `${who} lacks the scope ${scope}.`);
  }
  if (operation.organizationWide && caller.projectIds !== null)
    throw new Problem('forbidden', 'This key is bound to projects; this is about the whole organization.');
  return caller;
}

/** A project that a key is not for answers exactly like one that does not exist. */
function requireProject(caller: Caller, params: unknown): void {
  const projectId = (params as { projectId?: string } | undefined)?.projectId;
  if (projectId !== undefined && !mayUseProject(caller, projectId)) throw new Problem('not_found');
}

export function readQueryOf(request: Request, operation: Contract): unknown {
  return readQuery(operation.query, new URL(request.url).searchParams);
}

function replyText(operation: Contract, reply: Reply): string | null {
  if (reply.body === undefined) return null;
  if (getConfig().validateAnswers) checkAnswer(operation, reply.status, reply.body);
  return JSON.stringify(reply.body);
}
