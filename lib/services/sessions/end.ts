import { and, eq, isNull } from 'drizzle-orm';
import { sessions } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { Runtime } from '@/lib/runtime';

/** Ends all sessions of a person at once: they are read anew at every request. */
export async function endSessions(
  { tenant, runtime }: { tenant: Tenant; runtime: Runtime },
  { organizationId, id }: { organizationId: string; id: string },
): Promise<void> {
  await tenant.db
    .update(sessions)
    .set({ revokedAt: runtime.now().toISOString() })
    .where(
      and(eq(sessions.organizationId, organizationId), eq(sessions.personId, id), isNull(sessions.revokedAt)),
    );
}
