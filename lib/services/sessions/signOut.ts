import { and, eq } from 'drizzle-orm';
import { directory, sessions } from '@/db/schema';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { record } from '@/lib/services/record';

/** Ends the session at once, wherever its cookie is. */
export async function signOut(context: VerbContext): Promise<void> {
  const { tenant, caller, runtime } = context;
  if (caller.kind !== 'person') throw new Problem('forbidden', 'A key has no session; revoke it instead.');
  const mine = and(eq(sessions.organizationId, caller.organizationId), eq(sessions.id, caller.sessionId));
  const [row] = await tenant.db
    .update(sessions)
    .set({ revokedAt: runtime.now().toISOString() })
    .where(mine)
    .returning({ handleSha256: sessions.handleSha256 });
  await tenant.db.delete(directory).where(eq(directory.handleSha256, row.handleSha256));
  record(context, caller, { type: 'session.closed', subject: caller.personId });
}
