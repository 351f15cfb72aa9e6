import type { Caller } from '@/lib/access/actor';
import { type Problem, problemDocument } from '@/lib/problem';
import { stopwatch } from '@/lib/runtime';
import type { eventsAfter } from '@/lib/services/events/list';
import { problemOf } from './faults';
import type { Stream, Streams } from './streams';

type Page = Awaited<ReturnType<typeof eventsAfter>>;

/** Nothing passes on a quiet stream for so long and no longer; each time it is asked anew whether the caller may. */
export const HEARTBEAT_MS = 15_000;
/** What a client waits before it comes back, unless it knows better. */
const RETRY_MS = 3_000;

interface Source {
  caller: Caller;
  /** What comes after a cursor; whether the caller may still read it is asked anew each time. */
  read(after: string): Promise<Page>;
  first: Page;
  requestId: string;
  instance: string;
  heartbeatMs?: number;
}

/**
 * Events as server-sent events (HTML Living Standard, 9.2), the cursor as id of each. It reads on when its client has
 * taken what was there, so that a slow one costs neither memory nor the database; it ends with an event `problem` where
 * the caller may no longer read.
 */
export function eventStream(registry: Streams, source: Source): ReadableStream<Uint8Array> {
  const { caller, requestId, instance, heartbeatMs = HEARTBEAT_MS } = source;
  const encoder = new TextEncoder();
  let wakeUp: (() => void) | null = null;
  let ended = false;
  let pending: Page | null = source.first;
  let cursor = source.first.reached;
  let controller: ReadableStreamDefaultController<Uint8Array>;
  const stream: Stream = {
    caller,
    waiting: null,
    wake: () => wakeUp?.(),
    end: () => finish(),
    drop: () => {
      if (ended) return;
      leave();
      controller.error(new Error('The client takes nothing.'));
    },
  };
  // Before the answer has begun, so that a refusal is a problem like others.
  registry.add(stream);

  function leave(): void {
    ended = true;
    registry.remove(stream);
    wakeUp?.();
  }

  function finish(last = ''): void {
    if (ended) return;
    leave();
    if (last) controller.enqueue(encoder.encode(last));
    controller.close();
  }

  /** Until something happens, or for as long as a stream may be quiet; tells which. */
  function somethingOrQuiet(): Promise<'woken' | 'quiet'> {
    return new Promise((resolve) => {
      const timer = setTimeout(() => done('quiet'), heartbeatMs);
      const done = (how: 'woken' | 'quiet') => {
        clearTimeout(timer);
        wakeUp = null;
        resolve(how);
      };
      wakeUp = () => done('woken');
    });
  }

  async function next(): Promise<string> {
    let quiet = false;
    while (!ended) {
      const version = registry.versionOf(caller.organizationId);
      const page = pending ?? (await attempt());
      pending = null;
      if (ended) break;
      if (page !== null) cursor = page.reached;
      if (page !== null && page.told.length > 0) return page.told.map(framed).join('');
      // With how far was looked: whoever comes back later need not have it looked through again.
      if (quiet) return `: still here\nid: ${cursor}\n\n`;
      // What was seen while it was being read is read at once.
      if (version === registry.versionOf(caller.organizationId))
        quiet = (await somethingOrQuiet()) === 'quiet';
    }
    return '';
  }

  /** The next page; null where the database is away for the moment. */
  async function attempt(): Promise<Page | null> {
    try {
      return await source.read(cursor);
    } catch (error) {
      const problem = problemOf(error);
      if (problem.status >= 500) return null;
      finish(lastWords(problem));
      return null;
    }
  }

  const lastWords = (problem: Problem) =>
    `event: problem\ndata: ${JSON.stringify(problemDocument(problem, requestId, instance))}\n\n`;

  return new ReadableStream<Uint8Array>(
    {
      start(given) {
        controller = given;
        // Tells at once that the stream stands, and from where, though nothing may happen for long.
        const place = source.first.told.length === 0 ? `id: ${cursor}\n` : '';
        given.enqueue(encoder.encode(`retry: ${RETRY_MS}\n${place}\n`));
        stream.waiting = stopwatch();
      },
      async pull() {
        stream.waiting = null;
        const text = await next();
        if (ended) return;
        controller.enqueue(encoder.encode(text));
        stream.waiting = stopwatch();
      },
      cancel: leave,
    },
    { highWaterMark: 1 },
  );
}

/** One event; its type stands in the data, so that a plain listener gets every one. */
function framed({ event, cursor }: Page['told'][number]): string {
  return `id: ${cursor}\ndata: ${JSON.stringify(event)}\n\n`;
}
