import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { record } from '@/lib/services/record';
import type { Scope } from '@/openapi/scopes';
import { requireCoveredProjects, requireOwnScopes } from './grantable';
import { issueKey } from './issue';
import { changeApiKey, loadApiKey } from './load';
import { presentApiKey } from './present';

/** A successor with the same scopes and projects; the old key works on for the overlap. */
export async function rotateApiKey(
  context: VerbContext,
  { params, body }: { params: { apiKeyId: string }; body: { overlapMinutes: number } },
) {
  const { caller, runtime } = context;
  const old = await loadApiKey(context, params.apiKeyId);
  const now = runtime.now();
  requireOwnScopes(caller, old.scopes as Scope[]);
  requireCoveredProjects(caller, old.projectIds);
  if (presentApiKey(old, now).status !== 'active' || old.successorId !== null) {
    throw new Problem('conflict', 'Only a key that is active and has no successor is rotated.');
  }
  const { row, secret } = await issueKey(context, caller.organizationId, {
    name: old.name,
    scopes: old.scopes as Scope[],
    projectIds: old.projectIds,
    responsiblePersonId: old.responsiblePersonId,
    expiresAt: old.expiresAt,
  });
  const overlapEnds = new Date(now.getTime() + body.overlapMinutes * 60_000);
  const earlier = old.expiresAt !== null && new Date(old.expiresAt) < overlapEnds;
  const ending =
    body.overlapMinutes === 0
      ? { revokedAt: now.toISOString() }
      : { expiresAt: earlier ? old.expiresAt : overlapEnds.toISOString() };
  await changeApiKey(context, old, { ...ending, successorId: row.id });
  record(context, caller, {
    type: 'apiKey.rotated',
    subject: old.id,
    data: { successorId: row.id, overlapMinutes: body.overlapMinutes },
  });
  return { apiKey: presentApiKey(row, now), secret };
}
