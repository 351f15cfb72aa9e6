import { and, eq } from 'drizzle-orm';
import { apiKeys } from '@/db/schema';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import type { ApiKeyRow } from './present';

/** @throws Problem where the organization has no such key */
export async function loadApiKey({ tenant, caller }: VerbContext, apiKeyId: string): Promise<ApiKeyRow> {
  const [row] = await tenant.db
    .select()
    .from(apiKeys)
    .where(and(eq(apiKeys.organizationId, caller.organizationId), eq(apiKeys.id, apiKeyId)))
    .for('update');
  if (!row) throw new Problem('not_found', 'There is no such API key.');
  return row;
}

export async function changeApiKey(
  { tenant, caller }: VerbContext,
  row: ApiKeyRow,
  change: Partial<Pick<ApiKeyRow, 'revokedAt' | 'expiresAt' | 'successorId'>>,
): Promise<ApiKeyRow> {
  await tenant.db
    .update(apiKeys)
    .set(change)
    .where(and(eq(apiKeys.organizationId, caller.organizationId), eq(apiKeys.id, row.id)));
  return { ...row, ...change };
}
