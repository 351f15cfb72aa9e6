import { type Credential, credential } from '@/lib/access/identify';
import { isSecret } from '@/lib/access/secrets';
import { readSession, SESSION_COOKIE } from '@/lib/access/sessionToken';
import { getConfig } from '@/lib/config';
import { Problem } from '@/lib/problem';

const BEARER = /^Bearer +(\S+)$/i;

/** What a request shows to be let in: an API key, or a session cookie. */
export async function readCredential(request: Request, now: Date): Promise<Credential> {
  const authorization = request.headers.get('authorization');
  if (authorization !== null) return keyCredential(authorization);
  const cookie = sessionCookie(request);
  if (cookie === null) throw new Problem('unauthenticated', 'No key and no session came with the request.');
  if (request.method !== 'GET' && request.method !== 'HEAD') requireSameOrigin(request, true);
  const handle = await readSession(cookie, getConfig().secret, now);
  if (handle === null) throw new Problem('session_ended');
  return credential('session', handle);
}

function keyCredential(authorization: string): Credential {
  const secret = BEARER.exec(authorization)?.[1];
  if (!secret)
    throw new Problem('unauthenticated', 'The Authorization header is not of the form Bearer htk_….');
  if (!isSecret(secret, 'htk'))
    throw new Problem('unauthenticated', 'That is not an API key of a hub: its checksum is off.');
  return credential('key', secret);
}

function sessionCookie(request: Request): string | null {
  for (const part of (request.headers.get('cookie') ?? '').split(';')) {
    const [name, value] = part.split('=', 2);
    if (name.trim() === SESSION_COOKIE && value) return value.trim();
  }
  return null;
}

/**
 * Refuses a write that another site made the browser send.
 *
 * @param demanded browsers always say where a request comes from: with a cookie, silence is refused too
 */
export function requireSameOrigin(request: Request, demanded: boolean): void {
  const origin = request.headers.get('origin');
  const site = request.headers.get('sec-fetch-site');
  if (origin !== null) {
    if (!isOwnOrigin(origin, request)) throw new Problem('cross_site');
  } else if (site !== null) {
    if (site !== 'same-origin') throw new Problem('cross_site');
  } else if (demanded)
    throw new Problem('cross_site', 'Neither Origin nor Sec-Fetch-Site came with the session cookie.');
}

function isOwnOrigin(origin: string, request: Request): boolean {
  const { publicUrl } = getConfig();
  try {
    const { host, origin: normal } = new URL(origin);
    return (
      (publicUrl !== null && normal === new URL(publicUrl).origin) || host === request.headers.get('host')
    );
  } catch {
    return false;
  }
}
