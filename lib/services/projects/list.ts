import { and, desc, eq, inArray, lt } from 'drizzle-orm';
import { projects } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadClasses } from './classes';
import { presentProject } from './present';

export async function listProjects(
  { tenant, caller }: VerbContext,
  { query }: { query: { limit: number; cursor?: string } },
) {
  const list = ['projects'];
  const after = readCursor(list, query.cursor);
  const rows = await tenant.db
    .select()
    .from(projects)
    .where(
      and(
        eq(projects.organizationId, caller.organizationId),
        after === null ? undefined : lt(projects.id, after),
        caller.projectIds === null ? undefined : inArray(projects.id, [...caller.projectIds]),
      ),
    )
    .orderBy(desc(projects.id))
    .limit(query.limit + 1);
  const ids = rows.map((row) => row.id);
  const classes = await loadClasses(tenant, caller.organizationId, ids);
  return pageOf(
    rows,
    query.limit,
    list,
    (row) => row.id,
    (row) =>
      presentProject(
        row,
        classes.filter((c) => c.projectId === row.id),
      ),
  );
}
