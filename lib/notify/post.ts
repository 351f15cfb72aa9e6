import { lookup } from 'node:dns/promises';
import { type ClientRequest, request as httpRequest, type IncomingMessage } from 'node:http';
import { request as httpsRequest } from 'node:https';
import { isIP, type LookupFunction } from 'node:net';
import { stopwatch } from '@/lib/runtime';
import type { Reach } from './addresses';
import { faultOfTarget, hostOf } from './target';

/** What stands between a message and its receiver; an answer, of whatever status, is none. */
export type PostFailure =
  | 'target_refused'
  | 'name_unknown'
  | 'address_refused'
  | 'connection_failed'
  | 'certificate_refused'
  | 'timed_out'
  | 'answer_unreadable'
  | 'interrupted';

export interface PostAnswer {
  status: number;
  headers: Record<string, string>;
  body: string;
  truncated: boolean;
}

export interface Posted {
  milliseconds: number;
  /** The one that was checked and connected to. */
  address: string | null;
  answer: PostAnswer | null;
  failure: PostFailure | null;
}

export type Resolve = (host: string) => Promise<readonly { address: string; family: number }[]>;

export interface PostOptions {
  reach: Reach;
  /** Ends it from outside. */
  signal: AbortSignal;
  timeoutMs?: number;
  resolve?: Resolve;
}

export type Post = (
  target: string,
  headers: Record<string, string>,
  body: string,
  options: PostOptions,
) => Promise<Posted>;

const TIMEOUT_MS = 20_000;
/** So much of an answer is kept; the rest is not read. */
const KEPT_BYTES = 4096;
const KEPT_HEADERS = [
  'content-length',
  'content-type',
  'date',
  'location',
  'request-id',
  'retry-after',
  'server',
  'x-request-id',
];

class Failed extends Error {
  constructor(readonly failure: PostFailure) {
    super(failure);
  }
}

const resolveAll: Resolve = (host) => lookup(host, { all: true, verbatim: true });

/**
 * Posts a message to an address and answers what came of it; it does not throw. The name is resolved once, every
 * address that it leads to must be within reach, and the connection goes to the one that was checked, whatever the
 * name leads to by then. Redirects are answers like others, no proxy and no earlier connection is used.
 */
export const post: Post = async (target, headers, body, options) => {
  const elapsed = stopwatch();
  const { reach, signal, timeoutMs = TIMEOUT_MS, resolve = resolveAll } = options;
  const deadline = AbortSignal.timeout(timeoutMs);
  const either = AbortSignal.any([deadline, signal]);
  let address: string | null = null;
  const done = (answer: PostAnswer | null, failure: PostFailure | null): Posted => ({
    milliseconds: Math.round(elapsed()),
    address,
    answer,
    failure,
  });
  try {
    if (faultOfTarget(target, reach) !== null) throw new Failed('target_refused');
    const url = new URL(target);
    address = await checkedAddress(hostOf(url), reach, resolve, either);
    // Not the answer's body: with its head the message has arrived.
    const response = await Promise.race([send(url, address, headers, body, either), whenAborted(either)]);
    return done(await readAnswer(response), null);
  } catch (error) {
    if (signal.aborted) return done(null, 'interrupted');
    if (deadline.aborted) return done(null, 'timed_out');
    return done(null, error instanceof Failed ? error.failure : 'connection_failed');
  }
};

/** The address that a host leads to; one among several that is out of reach is a trap rather than a spare. */
async function checkedAddress(
  host: string,
  reach: Reach,
  resolve: Resolve,
  signal: AbortSignal,
): Promise<string> {
  const found =
    isIP(host) === 0
      ? await Promise.race([resolve(host).catch(() => []), whenAborted(signal)])
      : [{ address: host }];
  if (found.length === 0) throw new Failed('name_unknown');
  if (!found.every(({ address }) => reach.allows(address))) throw new Failed('address_refused');
  return found[0].address;
}

function whenAborted(signal: AbortSignal): Promise<never> {
  return new Promise((_, reject) => {
    const end = () => reject(new Failed('timed_out'));
    if (signal.aborted) end();
    else signal.addEventListener('abort', end, { once: true });
  });
}

/** Leads every name to one address. */
function pinnedTo(address: string): LookupFunction {
  const family = isIP(address);
  return (_host, { all }, callback) => {
    if (all) callback(null, [{ address, family }]);
    else callback(null, address, family);
  };
}

/** Sends a message and answers the head of what comes back; its body has not been read yet. */
function send(
  url: URL,
  address: string,
  headers: Record<string, string>,
  body: string,
  signal: AbortSignal,
): Promise<IncomingMessage> {
  const secure = url.protocol === 'https:';
  return new Promise((resolve, reject) => {
    const request: ClientRequest = (secure ? httpsRequest : httpRequest)(url, {
      method: 'POST',
      // A connection of its own: one that is kept open might lead elsewhere.
      agent: false,
      lookup: pinnedTo(address),
      signal,
      headers: { ...headers, 'content-length': String(Buffer.byteLength(body)), connection: 'close' },
    });
    request.on('error', (error: NodeJS.ErrnoException) => reject(new Failed(failureOf(error))));
    request.once('response', resolve);
    // An answer 101 is one like others: nothing is to be spoken but HTTP.
    request.once('upgrade', (response, socket) => {
      socket.destroy();
      response.destroy();
      resolve(response);
    });
    // Whatever else there may be that ends a request without an answer and without an error.
    request.once('close', () => reject(new Failed('connection_failed')));
    request.end(body);
  });
}

/** The answer's head decides; of its body the beginning is read, and what breaks off is kept as far as it came. */
async function readAnswer(response: IncomingMessage): Promise<PostAnswer> {
  const parts: Buffer[] = [];
  let bytes = 0;
  let whole = false;
  try {
    for await (const part of response as AsyncIterable<Buffer>) {
      parts.push(part);
      bytes += part.length;
      if (bytes > KEPT_BYTES) break;
    }
    whole = bytes <= KEPT_BYTES && response.complete;
  } catch {
    // Broken off: what came stands.
  }
  response.destroy();
  const text = Buffer.concat(parts).subarray(0, KEPT_BYTES).toString('utf8');
  return {
    status: response.statusCode ?? 0,
    headers: keptHeaders(response),
    // PostgreSQL takes no NUL.
    body: text.replaceAll('\0', '\uFFFD'),
    truncated: !whole,
  };
}

function keptHeaders({ headers }: IncomingMessage): Record<string, string> {
  return Object.fromEntries(
    KEPT_HEADERS.flatMap((name) => {
      const value = headers[name];
      return value === undefined ? [] : [[name, String(value).slice(0, 500)]];
    }),
  );
}

function failureOf(error: NodeJS.ErrnoException): PostFailure {
  const code = error.code ?? '';
  if (code.startsWith('HPE_')) return 'answer_unreadable';
  return /CERT|SIGNED|ISSUER|ALTNAME|TLS|SSL/.test(code) ? 'certificate_refused' : 'connection_failed';
}
