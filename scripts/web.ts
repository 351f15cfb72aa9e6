import { createServer } from 'node:http';
import next from 'next';
import { assertDurable } from '@/db/durability';
import { closeDatabase } from '@/db/tenant';
import { getConfig } from '@/lib/config';
import { closing } from '@/lib/http/closing';
import { createHubServer } from '@/lib/http/server';
import { streams } from '@/lib/http/streams';
import { prepareQueue } from '@/lib/jobs/queue';
import { log } from '@/lib/log/log';

/** How long requests under way may take to end after SIGTERM. */
const DRAIN_MS = 20_000;

const { mode, host, port } = getConfig();
await assertDurable();
await prepareQueue();
const dev = mode === 'development';
// Clients offer upgrades that nobody asked for (h2c). The framework would take those requests from its server and close
// them unanswered; it is given a server that gets none. Only in development it has a use for them.
const app = next({ dev, hostname: host, port, ...(dev ? {} : { httpServer: createServer() }) });
await app.prepare();
const server = createHubServer(app.getRequestHandler());
const close = closing(server);
server.listen(port, host, () => {
  const address = server.address();
  const bound = typeof address === 'object' && address ? address.port : port;
  log().info({ host, port: bound }, 'web ready');
});

let draining = false;

async function drain(signal: string): Promise<void> {
  if (draining) return;
  draining = true;
  log().info({ signal }, 'web draining');
  const closed = close();
  streams().endAll();
  await Promise.race([closed, new Promise((resolve) => setTimeout(resolve, DRAIN_MS))]);
  await closeDatabase();
  process.exit(0);
}

for (const signal of ['SIGTERM', 'SIGINT'] as const) process.on(signal, () => void drain(signal));
