import type * as z from 'zod';
import { moment } from '@/app/ui/numbers';
import type { Tone } from '@/app/ui/State';
import type { ApiKey } from '@/openapi/schemas/access';

export type Key = z.output<typeof ApiKey>;

/** How a key stands, in words. */
export function keyState(key: Key): { tone: Tone; word: string } {
  if (key.status === 'revoked')
    return { tone: 'fail', word: key.revokedAt ? `revoked ${moment(key.revokedAt)}` : 'revoked' };
  if (key.status === 'expired') return { tone: 'fail', word: 'expired' };
  if (key.successorId && key.expiresAt)
    return { tone: 'hold', word: `old key works until ${moment(key.expiresAt)}` };
  if (key.lastUsedAt === null) return { tone: 'plain', word: 'not used yet' };
  return { tone: 'pass', word: key.expiresAt ? `in use until ${moment(key.expiresAt)}` : 'in use' };
}
