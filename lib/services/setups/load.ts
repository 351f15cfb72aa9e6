import { and, desc, eq, type InferSelectModel, inArray, or } from 'drizzle-orm';
import { setupChecks, setupReleases, setupResults, setups } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { Problem } from '@/lib/problem';
import { type CheckResult, readResult, type SetupResult } from './result';

export type SetupRow = InferSelectModel<typeof setups>;
export type ResultRow = Omit<InferSelectModel<typeof setupResults>, 'result'> & { result: SetupResult };
export type CheckRow = Omit<InferSelectModel<typeof setupChecks>, 'result'> & { result: CheckResult };
export type ReleaseRow = InferSelectModel<typeof setupReleases>;

/** A setup with its present result, its checks so far and its last release. */
export interface LoadedSetup {
  setup: SetupRow;
  result: ResultRow;
  checks: CheckRow[];
  release: ReleaseRow | null;
}

/** @throws Problem where the project has no such setup */
export async function loadSetup(
  tenant: Tenant,
  organizationId: string,
  projectId: string,
  setupId: string,
  lock = false,
): Promise<LoadedSetup> {
  const query = tenant.db
    .select()
    .from(setups)
    .where(
      and(eq(setups.organizationId, organizationId), eq(setups.projectId, projectId), eq(setups.id, setupId)),
    );
  const [row] = await (lock ? query.for('update') : query);
  if (!row) throw new Problem('not_found', 'There is no such setup in this project.');
  const [loaded] = await completeSetups(tenant, organizationId, [row]);
  return loaded;
}

/**
 * Adds results, checks and releases to setups.
 *
 * @param version the result wanted, where it is not the present one
 */
export async function completeSetups(
  tenant: Tenant,
  organizationId: string,
  rows: readonly SetupRow[],
  version?: number,
): Promise<LoadedSetup[]> {
  if (rows.length === 0) return [];
  const ids = rows.map((row) => row.id);
  const wanted = rows.map((row) =>
    and(eq(setupResults.setupId, row.id), eq(setupResults.version, version ?? row.resultVersion)),
  );
  const [results, checks, releases] = await Promise.all([
    tenant.db
      .select()
      .from(setupResults)
      .where(and(eq(setupResults.organizationId, organizationId), or(...wanted)))
      .execute(),
    tenant.db
      .select()
      .from(setupChecks)
      .where(and(eq(setupChecks.organizationId, organizationId), inArray(setupChecks.setupId, ids)))
      .orderBy(setupChecks.observedAt, setupChecks.id)
      .execute(),
    tenant.db
      .selectDistinctOn([setupReleases.setupId])
      .from(setupReleases)
      .where(
        and(
          eq(setupReleases.organizationId, organizationId),
          inArray(setupReleases.setupId, ids),
          eq(setupReleases.action, 'release'),
        ),
      )
      .orderBy(setupReleases.setupId, desc(setupReleases.seq))
      .execute(),
  ]);
  const resultOf = new Map(
    results.map((row): [string, ResultRow] => [row.setupId, { ...row, result: readResult(row.result) }]),
  );
  return rows.map((setup) => ({
    setup,
    result: resultOf.get(setup.id)!,
    checks: checks.filter((check) => check.setupId === setup.id) as CheckRow[],
    release: releases.find((release) => release.setupId === setup.id) ?? null,
  }));
}
