import { callerTransaction } from '@/lib/access/identify';
import { systemRuntime as runtime } from '@/lib/runtime';
import type { eventsAfter } from '@/lib/services/events/list';
import type * as contract from '@/openapi/contracts/record';
import { readCredential } from './authenticate';
import { admit, type Handler, handler, readQueryOf } from './endpoint';
import { eventStream } from './eventStream';
import { streams } from './streams';

type StreamEvents = typeof contract.streamEvents;
type Query = Parameters<typeof eventsAfter>[1];

/** Events that are read at once. */
const PAGE = 100;

const HEADERS = {
  'Content-Type': 'text/event-stream; charset=utf-8',
  // Nobody on the way keeps it, packs it, or gathers it before passing it on.
  'Cache-Control': 'no-store, no-transform',
  'X-Accel-Buffering': 'no',
  'X-Content-Type-Options': 'nosniff',
};

/**
 * An operation that answers as long as its caller listens. Each page is read in a short transaction of its own, whose
 * first statement is who asks: a key that was revoked meanwhile reads nothing more.
 */
export function streamEndpoint(operation: StreamEvents, read: typeof eventsAfter): Handler {
  return handler(operation, async (request, base) => {
    const shown = await readCredential(request, runtime.now());
    const asked = readQueryOf(request, operation) as Omit<Query, 'limit'>;
    const pageAfter = (after: string | undefined) =>
      callerTransaction(shown, runtime.now(), async (tenant, identified) => {
        const caller = admit(await identified, operation, base);
        return { caller, page: await read({ tenant, caller }, { ...asked, after, limit: PAGE }) };
      });
    // A browser that comes back asks the same address, and says in the header how far it got.
    const { caller, page } = await pageAfter(request.headers.get('last-event-id') || asked.after);
    const headers = { ...HEADERS, 'Request-Id': base.requestId };
    if (request.method === 'HEAD') return new Response(null, { headers });
    const body = eventStream(streams(), {
      caller,
      first: page,
      read: async (after) => (await pageAfter(after)).page,
      requestId: base.requestId,
      instance: new URL(request.url).pathname,
    });
    return new Response(body, { headers });
  });
}
