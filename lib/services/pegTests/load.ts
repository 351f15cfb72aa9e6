import { and, eq, getTableColumns, type SQL } from 'drizzle-orm';
import { instruments, pegTests } from '@/db/schema';
import type { Tenant } from '@/db/tenant';

/** Two-peg tests, each with the name of its level. */
export function selectPegTests(tenant: Tenant, where: SQL | undefined) {
  return tenant.db
    .select({ ...getTableColumns(pegTests), instrumentName: instruments.name })
    .from(pegTests)
    .innerJoin(
      instruments,
      and(eq(instruments.organizationId, pegTests.organizationId), eq(instruments.id, pegTests.instrumentId)),
    )
    .where(where);
}
