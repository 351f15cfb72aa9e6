import { and, eq, lte, ne } from 'drizzle-orm';
import { webhookAttempts, webhookDeliveries, webhookEndpoints } from '@/db/schema';
import { type Tenant, tenantTransaction } from '@/db/tenant';
import type { Posted } from '@/lib/notify/post';
import { nextAttempt } from '@/lib/notify/schedule';
import type { Runtime } from '@/lib/runtime';
import { disableEndpoint } from '@/lib/services/webhookEndpoints/disable';
import { type EndpointRow, sameEndpoint } from '@/lib/services/webhookEndpoints/load';
import { withoutEndedSecret } from '@/lib/services/webhookEndpoints/secret';
import type { Claimed } from './claim';
import type { DeliveryRow } from './rows';

/** What was sent in an attempt, and what came of it. */
export interface Attempted {
  startedAt: Date;
  headers: Record<string, string>;
  posted: Omit<Posted, 'failure'> & { failure: string | null };
}

const GONE = 410;
/** Answers with which a receiver may ask for a longer pause. */
const ASKS_TO_WAIT = [429, 503];

const isDelivered = ({ posted: { answer } }: Attempted) =>
  answer !== null && answer.status >= 200 && answer.status < 300;

/**
 * Writes what became of an attempt: delivered, to be tried again, or given up; and what that means for the endpoint.
 * Of two workers that had the same delivery the later claim decides, save that what was delivered stays delivered.
 */
export function settle(
  { delivery, endpoint }: Claimed,
  attempted: Attempted,
  runtime: Runtime,
): Promise<void> {
  const { organizationId } = delivery;
  return tenantTransaction(organizationId, async (tenant) => {
    // The endpoint first, as whoever changes it does: in another order two could wait for each other.
    const [now] = await tenant.db
      .select()
      .from(webhookEndpoints)
      .where(sameEndpoint(organizationId, endpoint.id))
      .for('no key update');
    // It was deleted meanwhile, its deliveries with it.
    if (!now) return;
    await tenant.db.insert(webhookAttempts).values(attemptRow(delivery, endpoint, attempted));
    await dropEndedSecret(tenant, now, runtime);
    if (isDelivered(attempted)) return delivered(tenant, now, delivery, runtime);
    return notDelivered(tenant, now, delivery, attempted, runtime);
  });
}

async function delivered(
  tenant: Tenant,
  endpoint: EndpointRow,
  delivery: DeliveryRow,
  runtime: Runtime,
): Promise<void> {
  const at = runtime.now().toISOString();
  await tenant.db
    .update(webhookDeliveries)
    .set({ status: 'delivered', reason: null, nextAttemptAt: null, endedAt: at })
    .where(sameDelivery(delivery));
  // A test says nothing of how messages get through.
  if (delivery.kind === 'test') return;
  await tenant.db
    .update(webhookEndpoints)
    .set({ lastDeliveredAt: at, failingSince: null })
    .where(sameEndpoint(endpoint.organizationId, endpoint.id));
}

async function notDelivered(
  tenant: Tenant,
  endpoint: EndpointRow,
  delivery: DeliveryRow,
  { posted }: Attempted,
  runtime: Runtime,
): Promise<void> {
  const gone = posted.answer?.status === GONE;
  const isTest = delivery.kind === 'test';
  const next = gone || isTest ? null : nextAttempt(delivery.attempts, retryAfterOf(posted), runtime);
  const at = runtime.now().toISOString();
  const ended = { status: 'failed', nextAttemptAt: null, endedAt: at } as const;
  const { rowCount } = await tenant.db
    .update(webhookDeliveries)
    .set(
      next === null
        ? { ...ended, reason: gone ? 'endpoint_gone' : 'attempts_exhausted' }
        : { nextAttemptAt: next.toISOString() },
    )
    .where(
      and(
        sameDelivery(delivery),
        eq(webhookDeliveries.status, 'pending'),
        eq(webhookDeliveries.attempts, delivery.attempts),
      ),
    );
  // Switched off meanwhile, or another worker's by now; and a test says nothing here either.
  if (rowCount === 0 || isTest || !endpoint.enabled) return;
  if (gone) return disableEndpoint({ tenant, runtime }, endpoint, 'gone');
  if (next === null && noneSince(endpoint, delivery.createdAt))
    return disableEndpoint({ tenant, runtime }, endpoint, 'failing');
  if (endpoint.failingSince === null)
    await tenant.db
      .update(webhookEndpoints)
      .set({ failingSince: at })
      .where(sameEndpoint(endpoint.organizationId, endpoint.id));
}

async function dropEndedSecret(tenant: Tenant, endpoint: EndpointRow, runtime: Runtime): Promise<void> {
  const change = withoutEndedSecret(endpoint, runtime.now());
  if (change === null) return;
  await tenant.db
    .update(webhookEndpoints)
    .set(change)
    .where(sameEndpoint(endpoint.organizationId, endpoint.id));
}

/** Whether nothing got through to an endpoint since a moment. */
function noneSince({ lastDeliveredAt }: EndpointRow, moment: string): boolean {
  return lastDeliveredAt === null || new Date(lastDeliveredAt) < new Date(moment);
}

/** Gives a delivery back whose attempt was broken off by the worker's own stop, as if it had not been taken. */
export function handBack({ delivery }: Claimed, runtime: Runtime): Promise<void> {
  return tenantTransaction(delivery.organizationId, async (tenant) => {
    await tenant.db
      .update(webhookDeliveries)
      .set({ attempts: delivery.attempts - 1, nextAttemptAt: runtime.now().toISOString() })
      .where(
        and(
          sameDelivery(delivery),
          eq(webhookDeliveries.status, 'pending'),
          eq(webhookDeliveries.attempts, delivery.attempts),
        ),
      );
  });
}

/** Seconds that a receiver which is busy asked for. */
function retryAfterOf({ answer }: Attempted['posted']): number | null {
  if (!answer || !ASKS_TO_WAIT.includes(answer.status)) return null;
  const text = answer.headers['retry-after'] ?? '';
  return /^\d{1,6}$/.test(text) ? Number(text) : null;
}

function sameDelivery({ organizationId, id }: DeliveryRow) {
  return and(eq(webhookDeliveries.organizationId, organizationId), eq(webhookDeliveries.id, id));
}

function attemptRow(
  { organizationId, id, attempts }: DeliveryRow,
  { url }: EndpointRow,
  { startedAt, headers, posted }: Attempted,
) {
  const { 'webhook-signature': _, ...shown } = headers;
  return {
    organizationId,
    deliveryId: id,
    number: attempts,
    startedAt: startedAt.toISOString(),
    milliseconds: posted.milliseconds,
    url,
    address: posted.address,
    headers: shown,
    failure: posted.failure,
    answerStatus: posted.answer?.status ?? null,
    answerHeaders: posted.answer?.headers ?? null,
    answerBody: posted.answer?.body ?? null,
    answerTruncated: posted.answer?.truncated ?? null,
  };
}

/** Days that deliveries are kept. */
const KEPT_DAYS = 30;

/** Removes deliveries that ended long ago, with their attempts. */
export function sweepDeliveries(organizationId: string, runtime: Runtime): Promise<void> {
  const before = new Date(runtime.now().getTime() - KEPT_DAYS * 86_400_000).toISOString();
  return tenantTransaction(organizationId, async (tenant) => {
    await tenant.db
      .delete(webhookDeliveries)
      .where(
        and(
          eq(webhookDeliveries.organizationId, organizationId),
          ne(webhookDeliveries.status, 'pending'),
          lte(webhookDeliveries.endedAt, before),
        ),
      );
  });
}
