import { sql } from 'drizzle-orm';
import { directoryTransaction } from '@/db/tenant';

/** Whether the database answers, is migrated, and keeps what it acknowledges. */
export async function isReady(): Promise<boolean> {
  try {
    return await directoryTransaction(async ({ db }) => {
      const { rows } = await db.execute<{ durable: boolean }>(
        sql`select current_setting('synchronous_commit') = 'on' and to_regclass('directory') is not null as durable`,
      );
      return rows[0].durable;
    });
  } catch {
    return false;
  }
}
