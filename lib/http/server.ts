import {
  createServer,
  type IncomingMessage,
  type Server,
  type ServerResponse,
  STATUS_CODES,
} from 'node:http';
import type { Socket } from 'node:net';
import { getConfig } from '@/lib/config';
import { Problem, problemDocument } from '@/lib/problem';
import { systemRuntime as runtime } from '@/lib/runtime';
import { problemHeaders } from './answer';
import { ADDRESS_HEADER } from './endpoint';
import { guardRequest, isApi } from './guard';

const HEADERS_MS = 10_000;
const REQUEST_MS = 60_000;
const KEEP_ALIVE_MS = 65_000;
const MAX_HEADER_BYTES = 16_384;

/** The HTTP server in front of the framework: guards, time-outs, and problems even for what is hardly HTTP. */
export function createHubServer(
  handle: (request: IncomingMessage, response: ServerResponse) => Promise<void>,
): Server {
  // A missing Host is a problem of ours to answer: the server itself would answer an empty 400.
  const options = { maxHeaderSize: MAX_HEADER_BYTES, requireHostHeader: false };
  const server = createServer(options, (request, response) => {
    try {
      guardRequest(request);
    } catch (error) {
      if (!(error instanceof Problem)) throw error;
      refuse(response, error, request.url ?? '/');
      return;
    }
    // With it the framework's pages ask for parts of themselves; on the API it would answer a redirect.
    if (isApi(request.url)) delete request.headers.rsc;
    request.headers[ADDRESS_HEADER] = addressOf(request);
    handle(request, response).catch(() => response.destroy());
  });
  server.headersTimeout = HEADERS_MS;
  server.requestTimeout = REQUEST_MS;
  server.keepAliveTimeout = KEEP_ALIVE_MS;
  server.on('clientError', (error: NodeJS.ErrnoException, socket: Socket) => answerBroken(error, socket));
  server.on('connect', (request: IncomingMessage, socket: Socket) => {
    const problem = new Problem('method_not_allowed', 'This is no proxy.', { allow: 'GET, HEAD' });
    answerOn(socket, problem, request.url);
  });
  server.on('checkExpectation', (request: IncomingMessage, response: ServerResponse) => {
    refuse(
      response,
      new Problem('request_malformed', 'The Expect header is not understood.'),
      request.url ?? '/',
    );
  });
  return server;
}

/** The client's own address: the socket's, or what a trusted proxy in front says last. */
function addressOf(request: IncomingMessage): string {
  const forwarded = request.headers['x-forwarded-for'];
  if (getConfig().trustProxy && typeof forwarded === 'string')
    return forwarded.split(',').at(-1)?.trim() ?? 'unknown';
  return request.socket.remoteAddress ?? 'unknown';
}

function refuse(response: ServerResponse, problem: Problem, url: string): void {
  const requestId = runtime.uuid();
  const body = JSON.stringify(problemDocument(problem, requestId, url.split('?')[0].slice(0, 200)));
  response
    .writeHead(problem.status, { ...problemHeaders(problem, requestId), Connection: 'close' })
    .end(body);
}

/** What the parser could not read never becomes a request: the answer is written to the socket itself. */
function answerBroken(error: NodeJS.ErrnoException, socket: Socket): void {
  if (error.code === 'ECONNRESET' || !socket.writable) {
    socket.destroy();
    return;
  }
  const problem =
    error.code === 'HPE_HEADER_OVERFLOW'
      ? new Problem('headers_too_large')
      : error.code === 'ERR_HTTP_REQUEST_TIMEOUT'
        ? new Problem('request_timeout')
        : new Problem('request_malformed');
  answerOn(socket, problem);
}

function answerOn(socket: Socket, problem: Problem, instance = '/'): void {
  const requestId = runtime.uuid();
  const body = JSON.stringify(problemDocument(problem, requestId, instance.slice(0, 200)));
  const headers = {
    ...problemHeaders(problem, requestId),
    'Content-Length': String(Buffer.byteLength(body)),
    Connection: 'close',
  };
  const lines = Object.entries(headers).map(([name, value]) => `${name}: ${value}\r\n`);
  socket.end(`HTTP/1.1 ${problem.status} ${STATUS_CODES[problem.status]}\r\n${lines.join('')}\r\n${body}`);
}
