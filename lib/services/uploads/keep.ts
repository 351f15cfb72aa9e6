import type { InferInsertModel } from 'drizzle-orm';
import { bulkInsert } from '@/db/bulk';
import { rawBodies, uploadRefusals, uploads } from '@/db/schema';
import { tenantTransaction } from '@/db/tenant';
import { callerId } from '@/lib/access/actor';
import { sha256 } from '@/lib/access/secrets';
import type { RawBody } from '@/lib/formats/body';
import type { Problem } from '@/lib/problem';
import type { CallerContext } from '@/lib/services/context';
import { loadProject } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import { refusedItems } from '@/lib/services/refusedItems';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { RawFacts, UploadRow } from './present';

/** Rows of a body and its upload, for whichever transaction keeps them. */
export function rawAndUpload(
  { caller, runtime }: CallerContext,
  projectId: string,
  raw: RawBody,
  given: {
    uploadId: string;
    clientId: string | null;
    contentSha256: Buffer | null;
    status: UploadRow['status'];
    accepted: number;
    refusals: readonly ProblemItem[];
  },
): { rawRow: InferInsertModel<typeof rawBodies>; facts: RawFacts; uploadRow: UploadRow } {
  const { organizationId } = caller;
  const receivedAt = runtime.now().toISOString();
  const bytes = Buffer.from(raw.bytes.buffer, raw.bytes.byteOffset, raw.bytes.byteLength);
  const facts: RawFacts = {
    organizationId,
    id: runtime.uuid(),
    sha256: sha256(bytes),
    mediaType: raw.mediaType.slice(0, 200),
    contentEncoding: raw.contentEncoding?.slice(0, 80) ?? null,
    receivedAt,
    size: bytes.byteLength,
  };
  const { size: _, ...kept } = facts;
  const uploadRow: UploadRow = {
    organizationId,
    id: given.uploadId,
    projectId,
    clientId: given.clientId,
    status: given.status,
    rawBodyId: facts.id,
    accepted: given.accepted,
    refused: refusedItems(given.refusals),
    actorKind: caller.kind,
    actorId: callerId(caller),
    actorName: caller.name,
    receivedAt,
  };
  return { rawRow: { ...kept, contentSha256: given.contentSha256, bytes }, facts, uploadRow };
}

export function refusalRows(organizationId: string, uploadId: string, refusals: readonly ProblemItem[]) {
  return refusals.map((refusal, seq) => ({ organizationId, uploadId, seq, ...refusal }));
}

const insert = bulkInsert({ rawBodies, uploads, uploadRefusals });

/** Keeps a body that was refused, in a transaction of its own: what arrived is never lost. */
export async function keepRefused(
  context: CallerContext,
  projectId: string,
  raw: RawBody,
  clientId: string | null,
  problem: Problem,
): Promise<void> {
  const { caller, runtime } = context;
  const { organizationId } = caller;
  const uploadId = runtime.uuid();
  const refusals = problem.options.errors ?? [
    { ...problemItem('', 'invalid_value', problem.message), code: problem.code },
  ];
  const { rawRow, uploadRow } = rawAndUpload(context, projectId, raw, {
    uploadId,
    clientId,
    contentSha256: null,
    status: 'refused',
    accepted: 0,
    refusals,
  });
  await tenantTransaction(organizationId, async (tenant) => {
    await loadProject(tenant, organizationId, projectId);
    tenant.defer(
      insert(tenant, {
        rawBodies: [rawRow],
        uploads: [uploadRow],
        uploadRefusals: refusalRows(organizationId, uploadId, refusals),
      }),
    );
    record({ ...context, tenant }, caller, {
      type: 'upload.refused',
      subject: uploadId,
      projectId,
      data: { clientId, code: problem.code },
    });
  });
}
