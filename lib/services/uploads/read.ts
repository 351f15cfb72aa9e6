import { and, eq } from 'drizzle-orm';
import { rawBodies, uploads } from '@/db/schema';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/uploads';
import { loadReceipt } from './receipt';

type Read = typeof contract.getUpload;

export async function readUpload(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  return loadReceipt(tenant, project, params.uploadId, new Lengths(query.length ?? project.lengthUnit));
}

/** The bytes of an upload as they came, and a name to save them under. */
export async function readUploadRaw({ tenant, caller }: VerbContext, { params }: { params: ParamsOf<Read> }) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const [row] = await tenant.db
    .select({ bytes: rawBodies.bytes, encoding: rawBodies.contentEncoding })
    .from(uploads)
    .innerJoin(
      rawBodies,
      and(eq(rawBodies.organizationId, uploads.organizationId), eq(rawBodies.id, uploads.rawBodyId)),
    )
    .where(
      and(
        eq(uploads.organizationId, caller.organizationId),
        eq(uploads.projectId, project.id),
        eq(uploads.id, params.uploadId),
      ),
    );
  if (!row) throw new Problem('not_found', 'There is no such upload in this project.');
  return {
    bytes: row.bytes,
    fileName: `upload-${params.uploadId}${row.encoding === 'gzip' ? '.gz' : '.bin'}`,
  };
}
