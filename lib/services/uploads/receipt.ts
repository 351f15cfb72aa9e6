import { and, asc, eq, or, sql } from 'drizzle-orm';
import type * as z from 'zod';
import {
  benchChecks,
  gradeChecks,
  layers,
  rawBodies,
  setupChecks,
  setups,
  surfaces,
  uploadRefusals,
  uploads,
} from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { Problem } from '@/lib/problem';
import type { GradeRow } from '@/lib/services/grade/present';
import { type LayerFacts, presentBenchCheck, presentGradeCheck } from '@/lib/services/grade/present';
import type { Lengths } from '@/lib/services/lengths';
import type { ProjectRow } from '@/lib/services/projects/load';
import { type CheckRow, completeSetups, type LoadedSetup } from '@/lib/services/setups/load';
import { presentCheck, presentSetup } from '@/lib/services/setups/present';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Receipt } from '@/openapi/schemas/upload';
import { presentUpload, type RawFacts, type UploadRow } from './present';
import type { BenchRow } from './site';

/** All that an upload became. */
export interface ReceiptParts {
  upload: UploadRow;
  raw: RawFacts;
  refused: readonly ProblemItem[];
  setups: readonly LoadedSetup[];
  checks: readonly CheckRow[];
  grade: readonly GradeRow[];
  bench: readonly BenchRow[];
}

export function presentReceipt(
  parts: ReceiptParts,
  layerOf: (row: GradeRow) => LayerFacts,
  length: Lengths,
  decimals: number,
): z.output<typeof Receipt> {
  // As it was first answered: whatever was released, withdrawn or superseded since belongs to the setups themselves.
  const fresh = (loaded: LoadedSetup): LoadedSetup => ({
    ...loaded,
    setup: { ...loaded.setup, state: 'computed', supersededById: null },
    release: null,
  });
  const then = new Date(0);
  return {
    upload: presentUpload(parts.upload, parts.raw),
    refused: [...parts.refused],
    setups: parts.setups.map((loaded) => presentSetup(fresh(loaded), length, then)),
    setupChecks: parts.checks.map((check) => presentCheck(check, length)),
    gradeChecks: parts.grade.map((row) => presentGradeCheck(row, layerOf(row), length, decimals)),
    benchChecks: parts.bench.map((row) => presentBenchCheck(row, length)),
    roverPoints: [],
    levelRuns: [],
  };
}

/** The receipt of an upload that stands, from its rows. @throws Problem where there is no such upload */
export async function loadReceipt(
  tenant: Tenant,
  project: Pick<ProjectRow, 'organizationId' | 'id' | 'displayDecimals'>,
  uploadId: string,
  length: Lengths,
): Promise<z.output<typeof Receipt>> {
  const { organizationId } = project;
  const [found] = await tenant.db
    .select({
      upload: uploads,
      raw: {
        organizationId: rawBodies.organizationId,
        id: rawBodies.id,
        sha256: rawBodies.sha256,
        mediaType: rawBodies.mediaType,
        contentEncoding: rawBodies.contentEncoding,
        receivedAt: rawBodies.receivedAt,
        size: sql<number>`octet_length(${rawBodies.bytes})`,
      },
    })
    .from(uploads)
    .innerJoin(
      rawBodies,
      and(eq(rawBodies.organizationId, uploads.organizationId), eq(rawBodies.id, uploads.rawBodyId)),
    )
    .where(
      and(
        eq(uploads.organizationId, organizationId),
        eq(uploads.projectId, project.id),
        eq(uploads.id, uploadId),
      ),
    );
  if (!found) throw new Problem('not_found', 'There is no such upload in this project.');
  const [refusals, setupRows, checks, grade, bench] = await Promise.all([
    tenant.db
      .select()
      .from(uploadRefusals)
      .where(and(eq(uploadRefusals.organizationId, organizationId), eq(uploadRefusals.uploadId, uploadId)))
      .orderBy(asc(uploadRefusals.seq))
      .execute(),
    tenant.db
      .select()
      .from(setups)
      .where(
        and(
          eq(setups.organizationId, organizationId),
          eq(setups.uploadId, uploadId),
          eq(setups.rootId, setups.id),
        ),
      )
      .orderBy(asc(setups.id))
      .execute(),
    tenant.db
      .select()
      .from(setupChecks)
      .where(
        and(
          eq(setupChecks.organizationId, organizationId),
          eq(setupChecks.uploadId, uploadId),
          sql`${setupChecks.clientId} is not null`,
        ),
      )
      .orderBy(asc(setupChecks.id))
      .execute(),
    tenant.db
      .select()
      .from(gradeChecks)
      .where(and(eq(gradeChecks.organizationId, organizationId), eq(gradeChecks.uploadId, uploadId)))
      .orderBy(asc(gradeChecks.id))
      .execute(),
    tenant.db
      .select()
      .from(benchChecks)
      .where(and(eq(benchChecks.organizationId, organizationId), eq(benchChecks.uploadId, uploadId)))
      .orderBy(asc(benchChecks.id))
      .execute(),
  ]);
  const made: LoadedSetup[] = [];
  for (const row of setupRows) {
    // The first result, or the one after the checks that came with the same upload.
    const version = 1 + checks.filter((check) => check.setupId === row.id).length;
    made.push(...(await completeSetups(tenant, organizationId, [row], version)));
  }
  const layerOf = await layerFacts(tenant, project, grade);
  const parts: ReceiptParts = {
    upload: found.upload,
    raw: found.raw,
    refused: refusals.map(({ pointer, code, detail, fix }) => ({ pointer, code, detail, fix })),
    setups: made,
    checks: checks as CheckRow[],
    grade,
    bench,
  };
  return presentReceipt(parts, layerOf, length, project.displayDecimals);
}

/** The layers of grade checks in the versions that they were checked against. */
export async function layerFacts(
  tenant: Tenant,
  project: Pick<ProjectRow, 'organizationId' | 'id'>,
  rows: readonly Pick<GradeRow, 'layerName' | 'layerVersion'>[],
): Promise<(row: Pick<GradeRow, 'layerName' | 'layerVersion'>) => LayerFacts> {
  const keys = new Map(rows.map((row) => [`${row.layerName}\n${row.layerVersion}`, row]));
  if (keys.size === 0) {
    return () => {
      throw new Error('No layer was loaded.');
    };
  }
  const found = await tenant.db
    .select({
      name: layers.name,
      version: layers.version,
      offset: layers.offset,
      below: layers.below,
      above: layers.above,
      represents: surfaces.represents,
      surfaceSha256: sql<string>`encode(${surfaces.sha256}, 'hex')`,
    })
    .from(layers)
    .innerJoin(
      surfaces,
      and(eq(surfaces.organizationId, layers.organizationId), eq(surfaces.id, layers.surfaceId)),
    )
    .where(
      and(
        eq(layers.organizationId, project.organizationId),
        eq(layers.projectId, project.id),
        or(
          ...[...keys.values()].map((row) =>
            and(eq(layers.name, row.layerName), eq(layers.version, row.layerVersion)),
          ),
        ),
      ),
    );
  const facts = new Map(found.map((layer) => [`${layer.name}\n${layer.version}`, layer]));
  return (row) => facts.get(`${row.layerName}\n${row.layerVersion}`)!;
}
