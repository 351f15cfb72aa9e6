import { and, eq, sql } from 'drizzle-orm';
import { idempotencyKeys } from '@/db/schema';
import { callerId } from '@/lib/access/actor';
import { Problem } from '@/lib/problem';
import type { VerbContext } from './context';

const KEPT_HOURS = 24;

export interface KeptAnswer {
  status: number;
  /** JSON text as it was or will be sent. */
  text: string;
  replayed: boolean;
}

/**
 * Runs `produce` once for an Idempotency-Key and answers a repetition with what was answered first. Key and effect
 * are of one transaction: a request that fails leaves no key. Without a key it just runs.
 *
 * @param secret the answer is not kept; its repetition is refused
 */
export async function answerOnce(
  context: VerbContext,
  operation: string,
  produce: () => Promise<{ status: number; text: string }>,
  secret = false,
): Promise<KeptAnswer> {
  const { idempotency, caller, tenant, runtime } = context;
  if (!idempotency) return { ...(await produce()), replayed: false };
  const actorId = callerId(caller);
  const identity = `${caller.organizationId}/${actorId}/${operation}/${idempotency.key}`;
  const lock = await tenant.db.execute<{ free: boolean }>(
    sql`select pg_try_advisory_xact_lock(hashtextextended(${identity}, 0)) as free`,
  );
  if (!lock.rows[0]?.free) throw new Problem('request_in_progress', undefined, { retryAfter: 1 });

  const now = runtime.now();
  const mine = and(
    eq(idempotencyKeys.organizationId, caller.organizationId),
    eq(idempotencyKeys.actorId, actorId),
    eq(idempotencyKeys.operation, operation),
    eq(idempotencyKeys.key, idempotency.key),
  );
  const [kept] = await tenant.db.select().from(idempotencyKeys).where(mine);
  if (kept && new Date(kept.expiresAt) > now) {
    if (!kept.fingerprint.equals(idempotency.fingerprint)) throw new Problem('idempotency_mismatch');
    if (kept.secret || kept.body === null) throw new Problem('secret_already_shown');
    return { status: kept.status, text: kept.body, replayed: true };
  }
  if (kept) await tenant.db.delete(idempotencyKeys).where(mine);
  const answer = await produce();
  await tenant.db.insert(idempotencyKeys).values({
    organizationId: caller.organizationId,
    actorId,
    operation,
    key: idempotency.key,
    fingerprint: idempotency.fingerprint,
    status: answer.status,
    body: secret ? null : answer.text,
    secret,
    createdAt: now.toISOString(),
    expiresAt: new Date(now.getTime() + KEPT_HOURS * 3_600_000).toISOString(),
  });
  return { ...answer, replayed: false };
}
