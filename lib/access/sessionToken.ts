import { jwtVerify, SignJWT } from 'jose';

export const SESSION_COOKIE = 'hubtack_session';
export const SESSION_DAYS = 7;
const AUDIENCE = 'hubtack-console';

function key(secret: string): Uint8Array {
  return new TextEncoder().encode(secret);
}

/** Signs the handle of a session for its cookie; what the session may do is read anew at every request. */
export function signSession(handle: string, expiresAt: Date, secret: string): Promise<string> {
  return new SignJWT({})
    .setProtectedHeader({ alg: 'HS256' })
    .setJti(handle)
    .setAudience(AUDIENCE)
    .setExpirationTime(Math.floor(expiresAt.getTime() / 1000))
    .sign(key(secret));
}

/** The handle in a session cookie; null where signature, audience or time do not stand. */
export async function readSession(token: string, secret: string, now: Date): Promise<string | null> {
  try {
    const { payload } = await jwtVerify(token, key(secret), {
      audience: AUDIENCE,
      algorithms: ['HS256'],
      currentDate: now,
    });
    return payload.jti ?? null;
  } catch {
    return null;
  }
}
