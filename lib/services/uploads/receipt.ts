import { and, asc, eq, isNull, sql } from 'drizzle-orm';
import type * as z from 'zod';
import {
  benchChecks,
  gradeChecks,
  levelRuns,
  pegTests,
  rawBodies,
  setupChecks,
  setups,
  uploadRefusals,
  uploads,
} from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { Problem } from '@/lib/problem';
import { type BenchCheckRow, selectBenchChecks } from '@/lib/services/benchChecks/load';
import { presentBenchCheck } from '@/lib/services/benchChecks/present';
import { type GradeRow, presentGradeCheck } from '@/lib/services/gradeChecks/present';
import { type LayerFacts, layerFacts } from '@/lib/services/layers/facts';
import type { Lengths } from '@/lib/services/lengths';
import type { LevelRunRow } from '@/lib/services/levelRuns/load';
import { presentLevelRun } from '@/lib/services/levelRuns/present';
import { selectPegTests } from '@/lib/services/pegTests/load';
import { presentPegTest } from '@/lib/services/pegTests/present';
import type { PegTestRow } from '@/lib/services/pegTests/result';
import type { ProjectRow } from '@/lib/services/projects/load';
import { type CheckRow, completeSetups, type LoadedSetup } from '@/lib/services/setups/load';
import { presentCheck, presentSetup } from '@/lib/services/setups/present';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Receipt } from '@/openapi/schemas/upload';
import { RAW_FACTS } from './list';
import { presentUpload, type RawFacts, type UploadRow } from './present';

/** All that an upload became. */
export interface ReceiptParts {
  upload: UploadRow;
  raw: RawFacts;
  refused: readonly ProblemItem[];
  setups: readonly LoadedSetup[];
  checks: readonly CheckRow[];
  grade: readonly GradeRow[];
  bench: readonly BenchCheckRow[];
  levelRuns: readonly LevelRunRow[];
  pegTests: readonly PegTestRow[];
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
    setup: { ...loaded.setup, state: 'computed', validUntil: null, supersededById: null },
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
    levelRuns: parts.levelRuns.map((row) => presentLevelRun(row, length)),
    pegTests: parts.pegTests.map((row) => presentPegTest(row, length)),
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
      raw: RAW_FACTS,
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
  const [refusals, setupRows, checks, grade, bench, levels, pegs] = await Promise.all([
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
          isNull(setupChecks.carriedFromId),
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
    selectBenchChecks(
      tenant,
      and(eq(benchChecks.organizationId, organizationId), eq(benchChecks.uploadId, uploadId)),
    )
      .orderBy(asc(benchChecks.id))
      .execute(),
    tenant.db
      .select()
      .from(levelRuns)
      .where(and(eq(levelRuns.organizationId, organizationId), eq(levelRuns.uploadId, uploadId)))
      .orderBy(asc(levelRuns.id))
      .execute(),
    selectPegTests(tenant, and(eq(pegTests.organizationId, organizationId), eq(pegTests.uploadId, uploadId)))
      .orderBy(asc(pegTests.id))
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
    levelRuns: levels as LevelRunRow[],
    pegTests: pegs as PegTestRow[],
  };
  return presentReceipt(parts, layerOf, length, project.displayDecimals);
}
