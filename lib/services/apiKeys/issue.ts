import { apiKeys, directory } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { newSecret, sha256, shownPrefix } from '@/lib/access/secrets';
import type { Runtime } from '@/lib/runtime';
import type { Scope } from '@/openapi/scopes';
import type { ApiKeyRow } from './present';

/** Writes a new key and its place in the directory; the secret is answered and nowhere kept. */
export async function issueKey(
  { tenant, runtime }: { tenant: Tenant; runtime: Runtime },
  organizationId: string,
  key: {
    name: string;
    scopes: readonly Scope[];
    projectIds: readonly string[] | null;
    responsiblePersonId: string;
    expiresAt: string | null;
  },
): Promise<{ row: ApiKeyRow; secret: string }> {
  const secret = newSecret('htk', runtime);
  const secretSha256 = sha256(secret);
  const row: ApiKeyRow = {
    organizationId,
    id: runtime.uuid(),
    name: key.name,
    prefix: shownPrefix(secret),
    secretSha256,
    scopes: [...key.scopes],
    projectIds: key.projectIds && [...key.projectIds],
    responsiblePersonId: key.responsiblePersonId,
    createdAt: runtime.now().toISOString(),
    expiresAt: key.expiresAt,
    revokedAt: null,
    lastUsedAt: null,
    successorId: null,
  };
  await tenant.db.insert(apiKeys).values(row);
  await tenant.db
    .insert(directory)
    .values({ handleSha256: secretSha256, organizationId, kind: 'apiKey', subjectId: row.id });
  return { row, secret };
}
