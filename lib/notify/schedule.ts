import type { Runtime } from '@/lib/runtime';

const SECOND = 1000;
const MINUTE = 60 * SECOND;
const HOUR = 60 * MINUTE;

/** What passes between an attempt and the next, after the Standard Webhooks specification 1.0.0. */
const PAUSES = [
  5 * SECOND,
  5 * MINUTE,
  30 * MINUTE,
  2 * HOUR,
  5 * HOUR,
  10 * HOUR,
  14 * HOUR,
  20 * HOUR,
  24 * HOUR,
] as const;

/** The first attempt comes at once. */
export const MAX_ATTEMPTS = PAUSES.length + 1;

/** Up to a tenth is added by chance, so that what failed together does not come back together. */
const JITTER = 0.1;

/** No receiver puts a message off for longer than the longest pause. */
const LONGEST = 24 * HOUR;

/**
 * When a message is tried again; null where it was tried for the last time.
 *
 * @param attempts how many there were
 * @param retryAfter seconds that the receiver asked for: the pause is not shorter
 */
export function nextAttempt(attempts: number, retryAfter: number | null, runtime: Runtime): Date | null {
  if (attempts >= MAX_ATTEMPTS) return null;
  const chance = runtime.random(4).readUInt32BE() / 2 ** 32;
  const pause = PAUSES[attempts - 1] * (1 + JITTER * chance);
  const asked = Math.min((retryAfter ?? 0) * SECOND, LONGEST);
  return new Date(runtime.now().getTime() + Math.max(pause, asked));
}
