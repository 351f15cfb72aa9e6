import { and, eq, getTableColumns, type SQL } from 'drizzle-orm';
import { benchChecks, layers } from '@/db/schema';
import type { Tenant } from '@/db/tenant';

/** Bench checks, each with the offset of its layer in the version that it was checked for. */
export function selectBenchChecks(tenant: Tenant, where: SQL | undefined) {
  return tenant.db
    .select({ ...getTableColumns(benchChecks), layerOffset: layers.offset })
    .from(benchChecks)
    .leftJoin(
      layers,
      and(
        eq(layers.organizationId, benchChecks.organizationId),
        eq(layers.projectId, benchChecks.projectId),
        eq(layers.name, benchChecks.layerName),
        eq(layers.version, benchChecks.layerVersion),
      ),
    )
    .where(where);
}

export type BenchCheckRow = Awaited<ReturnType<typeof selectBenchChecks>>[number];
