import { and, eq, type InferSelectModel } from 'drizzle-orm';
import { webhookEndpoints } from '@/db/schema';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { withoutEndedSecret } from './secret';

export type EndpointRow = InferSelectModel<typeof webhookEndpoints>;

/**
 * @param lock until the end of the transaction, against changes and deliveries that settle
 * @throws Problem where the organization has no such endpoint
 */
export async function loadEndpoint(
  { tenant, caller }: VerbContext,
  id: string,
  lock = false,
): Promise<EndpointRow> {
  const query = tenant.db.select().from(webhookEndpoints).where(sameEndpoint(caller.organizationId, id));
  const [row] = await (lock ? query.for('no key update') : query);
  if (!row) throw new Problem('not_found', 'There is no such webhook endpoint.');
  return row;
}

export function sameEndpoint(organizationId: string, id: string) {
  return and(eq(webhookEndpoints.organizationId, organizationId), eq(webhookEndpoints.id, id));
}

export async function changeEndpoint(
  { tenant, caller, runtime }: VerbContext,
  row: EndpointRow,
  change: Partial<EndpointRow>,
): Promise<EndpointRow> {
  const now = runtime.now();
  const changed = { ...withoutEndedSecret(row, now), ...change, updatedAt: now.toISOString() };
  await tenant.db.update(webhookEndpoints).set(changed).where(sameEndpoint(caller.organizationId, row.id));
  return { ...row, ...changed };
}
