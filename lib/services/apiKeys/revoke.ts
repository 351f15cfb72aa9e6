import type { VerbContext } from '@/lib/services/context';
import { record } from '@/lib/services/record';
import { requireCoveredProjects } from './grantable';
import { changeApiKey, loadApiKey } from './load';
import { presentApiKey } from './present';

/** Ends a key at once: its state is read at every request. */
export async function revokeApiKey(context: VerbContext, { params }: { params: { apiKeyId: string } }) {
  const { caller, runtime } = context;
  const row = await loadApiKey(context, params.apiKeyId);
  requireCoveredProjects(caller, row.projectIds);
  if (row.revokedAt !== null) return presentApiKey(row, runtime.now());
  const revoked = await changeApiKey(context, row, { revokedAt: runtime.now().toISOString() });
  record(context, caller, {
    type: 'apiKey.revoked',
    subject: row.id,
    data: { name: row.name, prefix: row.prefix },
  });
  return presentApiKey(revoked, runtime.now());
}
