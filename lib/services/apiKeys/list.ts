import { and, desc, eq, lt } from 'drizzle-orm';
import { apiKeys } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { pageOf, readCursor } from '@/lib/services/paging';
import { presentApiKey } from './present';

export async function listApiKeys(
  { tenant, caller, runtime }: VerbContext,
  { query }: { query: { limit: number; cursor?: string } },
) {
  const list = ['api-keys'];
  const after = readCursor(list, query.cursor);
  const rows = await tenant.db
    .select()
    .from(apiKeys)
    .where(
      and(
        eq(apiKeys.organizationId, caller.organizationId),
        after === null ? undefined : lt(apiKeys.id, after),
      ),
    )
    .orderBy(desc(apiKeys.id))
    .limit(query.limit + 1);
  return pageOf(
    rows,
    query.limit,
    list,
    (row) => row.id,
    (row) => presentApiKey(row, runtime.now()),
  );
}
