import { isIP } from 'node:net';
import type { Reach } from './addresses';

/** The host of an address as a resolver wants it: IPv6 without its brackets. */
export function hostOf({ hostname }: URL): string {
  return hostname.replace(/^\[|\]$/g, '');
}

/**
 * What is wrong with an address before anybody asks where its name leads, in words; null where nothing is. What the
 * URL parser reads as an address (0x7f.1, 2130706433) is judged as that address.
 */
export function faultOfTarget(text: string, { http, allows }: Reach): string | null {
  const url = new URL(text);
  if (url.protocol !== 'https:' && !(http && url.protocol === 'http:')) return 'Messages are sent by https.';
  if (url.username !== '' || url.password !== '')
    return 'It holds a user name or password: the signature is what the receiver checks.';
  if (url.hash !== '') return 'A fragment is never sent.';
  const host = hostOf(url);
  if (isIP(host) !== 0 && !allows(host)) return `${host} is no public address.`;
  return null;
}
