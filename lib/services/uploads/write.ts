import { and, asc, eq, inArray } from 'drizzle-orm';
import { bulkInsert } from '@/db/bulk';
import {
  auditEntries,
  benchChecks,
  events,
  gradeChecks,
  levelDifferences,
  levelRuns,
  observations,
  pegTests,
  rawBodies,
  setupChecks,
  setupResults,
  setups,
  uploadRefusals,
  uploads,
} from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { CallerContext } from '@/lib/services/context';
import { recordRows } from '@/lib/services/record';
import type { Draft } from './draft';
import { type rawAndUpload, refusalRows } from './keep';

const insertAll = bulkInsert({
  rawBodies,
  uploads,
  uploadRefusals,
  setups,
  setupResults,
  observations,
  setupChecks,
  gradeChecks,
  benchChecks,
  pegTests,
  levelRuns,
  levelDifferences,
  events,
  auditEntries,
});

/** Writes an upload and all that came of it by one statement; COMMIT follows it on the wire. */
export function writeUpload(
  tenant: Tenant,
  context: CallerContext,
  draft: Draft,
  { rawRow, uploadRow }: ReturnType<typeof rawAndUpload>,
): void {
  const { organizationId, projectId, id } = uploadRow;
  const received = {
    type: 'upload.processed' as const,
    subject: id,
    projectId,
    data: { clientId: uploadRow.clientId, accepted: uploadRow.accepted, refused: uploadRow.refused },
  };
  tenant.defer(
    insertAll(tenant, {
      rawBodies: [rawRow],
      uploads: [uploadRow],
      uploadRefusals: refusalRows(organizationId, id, draft.refused),
      ...draft.rows,
      ...recordRows(context, context.caller, [received, ...draft.happenings]),
    }),
  );
  for (const { id: setupId, resultVersion, verdict } of draft.rejudged.values()) {
    tenant.defer(
      tenant.db
        .update(setups)
        .set({ resultVersion, verdict })
        .where(and(eq(setups.organizationId, organizationId), eq(setups.id, setupId)))
        .execute(),
    );
  }
}

/**
 * Whether somebody has refitted or checked a setup since it was read that this upload judges anew. Until the end of the
 * transaction nobody else does so.
 */
export async function isOvertaken(
  { db }: Pick<Tenant, 'db'>,
  organizationId: string,
  { rejudged, rows }: Draft,
): Promise<boolean> {
  if (rejudged.size === 0) return false;
  const standing = await db
    .select({ id: setups.id, resultVersion: setups.resultVersion, supersededById: setups.supersededById })
    .from(setups)
    .where(and(eq(setups.organizationId, organizationId), inArray(setups.id, [...rejudged.keys()])))
    .orderBy(asc(setups.id))
    .for('update');
  return standing.some(({ id, resultVersion, supersededById }) => {
    const read = rejudged.get(id)!;
    const added = rows.setupResults.filter(({ setupId }) => setupId === id).length;
    return resultVersion + added !== read.resultVersion || supersededById !== read.supersededById;
  });
}
