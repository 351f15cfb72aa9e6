// Takes what a hub tells by webhook, and checks each message before believing it. Needs Node.js 20 and the package of
// the Standard Webhooks specification (npm install standardwebhooks):
//
//   HUBTACK_WEBHOOK_SECRET=whsec_… PORT=8080 node receiver.mjs
//
// Make the endpoint first (POST /webhook-endpoints, or the console's page Hooks): it shows the secret once. In front
// of this stands whatever ends https.
import { createServer } from 'node:http';
import { Webhook } from 'standardwebhooks';

const secret = process.env.HUBTACK_WEBHOOK_SECRET;
if (!secret) {
  console.error('Set HUBTACK_WEBHOOK_SECRET to the secret that the hub has shown.');
  process.exit(1);
}
const webhook = new Webhook(secret);

/** Messages are smaller than this. */
const MAX_BYTES = 20_000;

async function read(request) {
  const parts = [];
  let bytes = 0;
  for await (const part of request) {
    bytes += part.length;
    if (bytes > MAX_BYTES) throw new Error('larger than any message');
    parts.push(part);
  }
  return Buffer.concat(parts).toString('utf8');
}

/** Ids that were seen: a message may come twice. A program that must not forget keeps them in its database. */
const seen = new Set();
const REMEMBERED = 10_000;

function remember(id) {
  if (seen.has(id)) return false;
  seen.add(id);
  if (seen.size > REMEMBERED) seen.delete(seen.values().next().value);
  return true;
}

const server = createServer(async (request, response) => {
  let message;
  try {
    // The bytes as they came: parsed and written again they would be others.
    message = webhook.verify(await read(request), request.headers);
  } catch (error) {
    console.log(`refused: ${error.message}`);
    response.writeHead(400).end();
    return;
  }
  // Answer first and work afterwards: the hub waits for 20 seconds and then sends it again.
  response.writeHead(204).end();
  if (!remember(request.headers['webhook-id'])) {
    console.log(`again: ${request.headers['webhook-id']}`);
    return;
  }
  const { type, timestamp, data } = message;
  console.log(`${timestamp} ${type} ${data.subject}`);
});

server.listen(Number(process.env.PORT ?? 8080), process.env.HOST ?? '127.0.0.1', () => {
  console.log(`listening on port ${server.address().port}`);
});
