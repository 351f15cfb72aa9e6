import { createHmac } from 'node:crypto';
import type { Runtime } from '@/lib/runtime';

const PREFIX = 'whsec_';
/** The specification asks for 24 to 64. */
const SECRET_BYTES = 32;

/** A signing secret as the Standard Webhooks specification 1.0.0 writes it. */
export function newSigningSecret(runtime: Runtime): string {
  return PREFIX + runtime.random(SECRET_BYTES).toString('base64');
}

/**
 * The headers of a message, signed as the Standard Webhooks specification 1.0.0 says: HMAC-SHA256 over
 * `id.timestamp.body`, one signature for each secret that holds at the moment.
 */
export function signedHeaders(
  { id, at, body }: { id: string; at: Date; body: string },
  secrets: readonly string[],
): Record<string, string> {
  const timestamp = String(Math.floor(at.getTime() / 1000));
  const signatures = secrets.map((secret) => {
    const key = Buffer.from(secret.slice(PREFIX.length), 'base64');
    return `v1,${createHmac('sha256', key).update(`${id}.${timestamp}.${body}`).digest('base64')}`;
  });
  return { 'webhook-id': id, 'webhook-timestamp': timestamp, 'webhook-signature': signatures.join(' ') };
}
