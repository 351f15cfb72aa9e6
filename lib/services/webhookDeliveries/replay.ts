import { and, asc, eq, gte, lt, sql } from 'drizzle-orm';
import { events } from '@/db/schema';
import { invalid, Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { asMoment, utcInstant } from '@/lib/services/moments';
import { record } from '@/lib/services/record';
import { wants } from '@/lib/services/webhookEndpoints/filters';
import { type EndpointRow, loadEndpoint } from '@/lib/services/webhookEndpoints/load';
import type { JsonOf, ParamsOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/webhooks';
import { type DeliveryParams, loadDelivery } from './load';
import { presentDelivery } from './present';
import { enqueue, newDelivery } from './rows';

/** Messages that one replay sends at most. */
const MAX_MESSAGES = 10_000;
/** Events that are looked at for them. */
const MAX_EVENTS = 100_000;

/** Ids are told by the clock of the process that made them, which may be off by so much from when it happened. */
const CLOCK_MS = 60_000;

function requireEnabled({ enabled }: EndpointRow): void {
  if (!enabled) throw new Problem('conflict', 'The endpoint is off: switch it on first.');
}

/** Sends a message again under its own id. */
export async function replayWebhookDelivery(context: VerbContext, { params }: { params: DeliveryParams }) {
  const { tenant, caller, runtime } = context;
  const { endpoint, row } = await loadDelivery(context, params, true);
  if (row.eventId === null) throw new Problem('conflict', 'A test is not replayed: send another one.');
  requireEnabled(endpoint);
  const again = newDelivery(runtime, endpoint, { ...row, kind: 'replay' });
  await enqueue(tenant, [again]);
  record(context, caller, {
    type: 'webhookEndpoint.replayed',
    subject: endpoint.id,
    data: { deliveryId: row.id, count: 1 },
  });
  return presentDelivery(again, null);
}

type ReplayEvents = typeof contract.replayWebhookEvents;

/** Sends everything of a time range again that passes the endpoint's filters. */
export async function replayWebhookEvents(
  context: VerbContext,
  { params, body }: { params: ParamsOf<ReplayEvents>; body: JsonOf<ReplayEvents> },
) {
  const { tenant, caller, runtime } = context;
  const endpoint = await loadEndpoint(context, params.webhookEndpointId, true);
  requireEnabled(endpoint);
  const since = utcInstant(body.since);
  const until = body.until === undefined ? asMoment(runtime.now().toISOString()) : utcInstant(body.until);
  if (new Date(until) <= new Date(since))
    throw invalid('/until', 'time_out_of_order', 'The range ends before it begins.', 'Send a later time.');
  const rows = await tenant.db
    .select({ id: events.id, type: events.type, projectId: events.projectId })
    .from(events)
    .where(
      and(
        eq(events.organizationId, caller.organizationId),
        // Ids grow with time, and the key is led by them: no other index need know the time of events.
        gte(events.id, idAt(new Date(since).getTime() - CLOCK_MS)),
        lt(events.id, idAt(new Date(until).getTime() + CLOCK_MS)),
        sql`${events.occurredAt} >= ${since} and ${events.occurredAt} < ${until}`,
        sql`${events.xid} < pg_snapshot_xmin(pg_current_snapshot())`,
      ),
    )
    .orderBy(asc(events.id))
    .limit(MAX_EVENTS + 1);
  if (rows.length > MAX_EVENTS)
    throw new Problem(
      'conflict',
      `More than ${MAX_EVENTS} events of any kind happened in that range, more than are looked at at once: name a shorter range.`,
    );
  const wanted = rows.filter((event) => wants(endpoint, event));
  if (wanted.length > MAX_MESSAGES)
    throw new Problem(
      'conflict',
      `More than ${MAX_MESSAGES} messages are not sent at once: name a shorter range.`,
    );
  await enqueue(
    tenant,
    wanted.map(({ id, type, projectId }) =>
      newDelivery(runtime, endpoint, { kind: 'replay', eventId: id, eventType: type, projectId }),
    ),
  );
  record(context, caller, {
    type: 'webhookEndpoint.replayed',
    subject: endpoint.id,
    data: { since, until, count: wanted.length },
  });
  return { count: wanted.length, since, until };
}

/** The least UUID of version 7 of a millisecond. */
function idAt(milliseconds: number): string {
  const hex = Math.max(0, milliseconds).toString(16).padStart(12, '0');
  return `${hex.slice(0, 8)}-${hex.slice(8)}-7000-8000-000000000000`;
}
