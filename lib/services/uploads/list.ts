import { and, desc, eq, lt, sql } from 'drizzle-orm';
import { rawBodies, uploads } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { pageOf, readCursor } from '@/lib/services/paging';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/uploads';
import { presentUpload } from './present';

/** What a receipt tells of a raw body. */
export const RAW_FACTS = {
  organizationId: rawBodies.organizationId,
  id: rawBodies.id,
  sha256: rawBodies.sha256,
  mediaType: rawBodies.mediaType,
  contentEncoding: rawBodies.contentEncoding,
  receivedAt: rawBodies.receivedAt,
  size: sql<number>`octet_length(${rawBodies.bytes})`,
};

type List = typeof contract.listUploads;

export async function listUploads(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<List>; query: QueryOf<List> },
) {
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const list = ['uploads', project.id, query.status];
  const after = readCursor(list, query.cursor);
  const rows = await tenant.db
    .select({ upload: uploads, raw: RAW_FACTS })
    .from(uploads)
    .innerJoin(
      rawBodies,
      and(eq(rawBodies.organizationId, uploads.organizationId), eq(rawBodies.id, uploads.rawBodyId)),
    )
    .where(
      and(
        eq(uploads.organizationId, organizationId),
        eq(uploads.projectId, project.id),
        query.status ? eq(uploads.status, query.status) : undefined,
        after === null ? undefined : lt(uploads.id, after),
      ),
    )
    .orderBy(desc(uploads.id))
    .limit(query.limit + 1);
  return pageOf(
    rows,
    query.limit,
    list,
    (row) => row.upload.id,
    (row) => presentUpload(row.upload, row.raw),
  );
}
