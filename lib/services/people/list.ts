import { and, desc, eq, lt } from 'drizzle-orm';
import { people } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { pageOf, readCursor } from '@/lib/services/paging';
import { presentPerson } from './present';

export async function listPeople(
  { tenant, caller }: VerbContext,
  { query }: { query: { limit: number; cursor?: string } },
) {
  const list = ['people'];
  const after = readCursor(list, query.cursor);
  const rows = await tenant.db
    .select()
    .from(people)
    .where(
      and(
        eq(people.organizationId, caller.organizationId),
        after === null ? undefined : lt(people.id, after),
      ),
    )
    .orderBy(desc(people.id))
    .limit(query.limit + 1);
  return pageOf(rows, query.limit, list, (row) => row.id, presentPerson);
}
