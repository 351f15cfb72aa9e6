import { sql } from 'drizzle-orm';
import { directoryTransaction } from './tenant';

/** Whether the database is migrated and keeps what it acknowledges. @throws Error where it does not answer */
export function databaseReady(): Promise<boolean> {
  return directoryTransaction(async ({ db }) => {
    const { rows } = await db.execute<{ ready: boolean }>(
      sql`select current_setting('synchronous_commit') = 'on' and to_regclass('directory') is not null as ready`,
    );
    return rows[0].ready;
  });
}
