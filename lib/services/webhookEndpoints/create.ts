import { count, eq, sql } from 'drizzle-orm';
import { directory, webhookEndpoints } from '@/db/schema';
import { sha256 } from '@/lib/access/secrets';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { record } from '@/lib/services/record';
import type { JsonOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/webhooks';
import { requireEventScope, requireKnownProjects, requireTarget } from './filters';
import type { EndpointRow } from './load';
import { presentEndpoint } from './present';
import { makeSecret } from './secret';
import { tipOf } from './tip';

/** Every event is held against each of them. */
const MAX_ENDPOINTS = 50;

/** Makes an endpoint: it is told what happens from now on. */
export async function createWebhookEndpoint(
  context: VerbContext,
  { body }: { body: JsonOf<typeof contract.createWebhookEndpoint> },
) {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  requireEventScope(context);
  requireTarget(body.url);
  await requireKnownProjects(context, body.projectIds);
  await requireRoom(context);
  const at = runtime.now().toISOString();
  const id = runtime.uuid();
  const { secret, secretSealed } = makeSecret({ organizationId, id }, runtime);
  const row: EndpointRow = {
    organizationId,
    id,
    url: body.url,
    description: body.description,
    eventTypes: body.eventTypes,
    projectIds: body.projectIds,
    enabled: body.enabled,
    disabledAt: body.enabled ? null : at,
    disabledReason: body.enabled ? null : 'by_request',
    failingSince: null,
    lastDeliveredAt: null,
    secretSealed,
    secretMadeAt: at,
    previousSecretSealed: null,
    previousSecretEndsAt: null,
    ...(await tipOf(tenant, organizationId)),
    createdAt: at,
    updatedAt: at,
  };
  await tenant.db.insert(webhookEndpoints).values(row);
  await tenant.db
    .insert(directory)
    .values({ handleSha256: webhookHandle(id), organizationId, kind: 'webhook', subjectId: id });
  const { url, eventTypes, projectIds } = row;
  record(context, caller, {
    type: 'webhookEndpoint.created',
    subject: id,
    data: { host: new URL(url).host, eventTypes, projectIds },
  });
  return { endpoint: presentEndpoint(row, runtime.now()), secret };
}

/** Endpoints of an organization are made one after the other: two at once would not see each other. */
async function requireRoom({ tenant, caller: { organizationId } }: VerbContext): Promise<void> {
  const making = `${organizationId}/webhook endpoints`;
  await tenant.db.execute(sql`select pg_advisory_xact_lock(hashtextextended(${making}, 0))`);
  const [{ endpoints }] = await tenant.db
    .select({ endpoints: count() })
    .from(webhookEndpoints)
    .where(eq(webhookEndpoints.organizationId, organizationId));
  if (endpoints >= MAX_ENDPOINTS)
    throw new Problem(
      'conflict',
      `There are ${MAX_ENDPOINTS} endpoints, which is the most: delete one first.`,
    );
}

/** Under which the directory keeps an endpoint: whoever delivers finds the organizations that have any. */
export function webhookHandle(id: string): Buffer {
  return sha256(`webhook:${id}`);
}
