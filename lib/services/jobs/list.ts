import { and, desc, eq, inArray, lt } from 'drizzle-orm';
import { jobs } from '@/db/schema';
import { mayUseProject } from '@/lib/access/actor';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { pageOf, readCursor } from '@/lib/services/paging';
import type { QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/jobs';
import { presentJob } from './present';

type List = typeof contract.listJobs;

export async function listJobs({ tenant, caller }: VerbContext, { query }: { query: QueryOf<List> }) {
  if (query.projectId !== undefined && !mayUseProject(caller, query.projectId))
    throw new Problem('not_found', 'There is no such project.');
  const list = ['jobs', query.projectId, query.status, query.kind];
  const after = readCursor(list, query.cursor);
  const rows = await tenant.db
    .select()
    .from(jobs)
    .where(
      and(
        eq(jobs.organizationId, caller.organizationId),
        query.projectId ? eq(jobs.projectId, query.projectId) : undefined,
        query.status ? eq(jobs.status, query.status) : undefined,
        query.kind ? eq(jobs.kind, query.kind) : undefined,
        caller.projectIds === null ? undefined : inArray(jobs.projectId, [...caller.projectIds]),
        after === null ? undefined : lt(jobs.id, after),
      ),
    )
    .orderBy(desc(jobs.id))
    .limit(query.limit + 1);
  return pageOf(rows, query.limit, list, ({ id }) => id, presentJob);
}
