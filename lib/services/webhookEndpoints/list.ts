import { and, desc, eq, lt } from 'drizzle-orm';
import { webhookEndpoints } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { pageOf, readCursor } from '@/lib/services/paging';
import { presentEndpoint } from './present';

export async function listWebhookEndpoints(
  { tenant, caller, runtime }: VerbContext,
  { query }: { query: { limit: number; cursor?: string } },
) {
  const list = ['webhook-endpoints'];
  const after = readCursor(list, query.cursor);
  const rows = await tenant.db
    .select()
    .from(webhookEndpoints)
    .where(
      and(
        eq(webhookEndpoints.organizationId, caller.organizationId),
        after === null ? undefined : lt(webhookEndpoints.id, after),
      ),
    )
    .orderBy(desc(webhookEndpoints.id))
    .limit(query.limit + 1);
  return pageOf(
    rows,
    query.limit,
    list,
    (row) => row.id,
    (row) => presentEndpoint(row, runtime.now()),
  );
}
