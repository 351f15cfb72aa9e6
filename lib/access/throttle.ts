import { RateLimiterMemory } from 'rate-limiter-flexible';
import { Problem } from '@/lib/problem';

const WINDOW_SECONDS = 15 * 60;

/** Failed sign-ins by account and by address; one wrong account does not lock a whole site office out. */
const byAccount = new RateLimiterMemory({ points: 10, duration: WINDOW_SECONDS });
const byAddress = new RateLimiterMemory({ points: 100, duration: WINDOW_SECONDS });

/** @throws Problem where account or address have failed too often lately */
export async function requireAttempt(account: string, address: string): Promise<void> {
  for (const [limiter, key] of [
    [byAccount, account],
    [byAddress, address],
  ] as const) {
    const state = await limiter.get(key);
    if (state !== null && state.remainingPoints <= 0) {
      throw new Problem('too_many_requests', undefined, { retryAfter: Math.ceil(state.msBeforeNext / 1000) });
    }
  }
}

/** Counts a failed attempt. */
export async function countFailure(account: string, address: string): Promise<void> {
  const ignore = () => undefined;
  await Promise.all([byAccount.consume(account).catch(ignore), byAddress.consume(address).catch(ignore)]);
}

/** A sign-in that succeeded clears its account. */
export async function clearFailures(account: string): Promise<void> {
  await byAccount.delete(account);
}
