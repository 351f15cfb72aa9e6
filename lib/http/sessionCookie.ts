import { SESSION_COOKIE, signSession } from '@/lib/access/sessionToken';
import { getConfig } from '@/lib/config';
import type { OpenedSession } from '@/lib/services/sessions/open';
import { Reply } from './answer';

/** Read by no script and sent to no other site; marked Secure where the hub is reached by https. */
function cookie(value: string, expires: Date): string {
  const secure = getConfig().publicUrl?.startsWith('https:') ? '; Secure' : '';
  return `${SESSION_COOKIE}=${value}; Path=/; HttpOnly; SameSite=Lax; Expires=${expires.toUTCString()}${secure}`;
}

/** An answer that signs in. */
export async function withSession(body: unknown, { handle, expiresAt }: OpenedSession): Promise<Reply> {
  const token = await signSession(handle, expiresAt, getConfig().secret);
  return new Reply(201, body, { 'Set-Cookie': cookie(token, expiresAt) });
}

/** An answer that signs out. */
export function withoutSession(): Reply {
  return new Reply(204, undefined, { 'Set-Cookie': cookie('', new Date(0)) });
}
