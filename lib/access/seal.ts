import { createCipheriv, createDecipheriv, hkdfSync } from 'node:crypto';
import type { Runtime } from '@/lib/runtime';

const CIPHER = 'aes-256-gcm';
const NONCE_BYTES = 12;
const TAG_BYTES = 16;

/** A key for one purpose, made of the hub's secret (RFC 5869). */
function keyOf(hubSecret: string): Buffer {
  return Buffer.from(hkdfSync('sha256', hubSecret, '', 'hubtack webhook secrets', 32));
}

/**
 * Seals a secret that is needed again as it is, so that a copy of the database alone does not give it away.
 *
 * @param place whose it is: opened for another, the seal does not hold
 */
export function seal(secret: string, place: string, hubSecret: string, runtime: Runtime): Buffer {
  const nonce = runtime.random(NONCE_BYTES);
  const cipher = createCipheriv(CIPHER, keyOf(hubSecret), nonce).setAAD(Buffer.from(place));
  const sealed = Buffer.concat([cipher.update(secret, 'utf8'), cipher.final()]);
  return Buffer.concat([nonce, cipher.getAuthTag(), sealed]);
}

/** @throws Error where the seal was made for another place, or with another secret of the hub */
export function unseal(sealed: Buffer, place: string, hubSecret: string): string {
  const nonce = sealed.subarray(0, NONCE_BYTES);
  const tag = sealed.subarray(NONCE_BYTES, NONCE_BYTES + TAG_BYTES);
  const decipher = createDecipheriv(CIPHER, keyOf(hubSecret), nonce, { authTagLength: TAG_BYTES })
    .setAAD(Buffer.from(place))
    .setAuthTag(tag);
  return (
    decipher.update(sealed.subarray(NONCE_BYTES + TAG_BYTES), undefined, 'utf8') + decipher.final('utf8')
  );
}
