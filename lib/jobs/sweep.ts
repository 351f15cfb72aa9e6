import { sql } from 'drizzle-orm';
import { directory, idempotencyKeys, sessions } from '@/db/schema';
import { directoryTransaction, tenantTransaction } from '@/db/tenant';
import { log } from '@/lib/log/log';
import type { Runtime } from '@/lib/runtime';

/** Every organization that the directory knows. */
async function organizationIds(): Promise<string[]> {
  return directoryTransaction(async ({ db }) => {
    const rows = await db.selectDistinct({ id: directory.organizationId }).from(directory);
    return rows.map(({ id }) => id);
  });
}

/**
 * Does `work` for every organization: what fails for one is logged, and does not keep the others from it.
 *
 * @throws the first failure, when all have had their turn: the queue tries again
 */
export async function eachOrganization(
  task: string,
  work: (organizationId: string) => Promise<void>,
): Promise<void> {
  const failures: unknown[] = [];
  for (const organizationId of await organizationIds()) {
    try {
      await work(organizationId);
    } catch (err) {
      failures.push(err);
      log().error({ task, organizationId, err }, 'job failed for an organization');
    }
  }
  if (failures.length > 0) throw failures[0];
}

/**
 * Removes idempotency keys whose time is over and directory entries of sessions that have ended, organization by
 * organization, each in its own transaction. Doing it twice is harmless.
 *
 * @returns how many idempotency keys went
 */
export async function sweep(runtime: Runtime): Promise<number> {
  const now = runtime.now().toISOString();
  let removed = 0;
  await eachOrganization('sweep', async (organizationId) => {
    removed += await tenantTransaction(organizationId, async ({ db }) => {
      const keys = await db.delete(idempotencyKeys).where(sql`${idempotencyKeys.expiresAt} <= ${now}`);
      await db.delete(directory).where(
        sql`${directory.kind} = 'session' and ${directory.subjectId} in
          (select ${sessions.id} from ${sessions} where ${sessions.expiresAt} <= ${now})`,
      );
      return keys.rowCount ?? 0;
    });
  });
  return removed;
}
