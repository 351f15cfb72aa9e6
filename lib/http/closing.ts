import type { Server, ServerResponse } from 'node:http';

/**
 * Answers what closes a server: it takes no further connection, and those that it has end with the answer they wait
 * for. Kept alive, each would hold it open until its client has enough.
 */
export function closing(server: Server): () => Promise<void> {
  const underWay = new Set<ServerResponse>();
  server.prependListener('request', (_request, response: ServerResponse) => {
    if (!server.listening) endConnectionWith(response);
    underWay.add(response);
    response.once('close', () => underWay.delete(response));
  });
  return () =>
    new Promise((resolve) => {
      // Ends the idle connections, too.
      server.close(() => resolve());
      underWay.forEach(endConnectionWith);
    });
}

function endConnectionWith(response: ServerResponse): void {
  // Told where the headers are still to come, and done in any case.
  response.shouldKeepAlive = false;
  const { socket } = response;
  response.once('finish', () => socket?.destroySoon());
}
