import { sql } from 'drizzle-orm';
import { directoryTransaction } from './tenant';

/** Settings without which an acknowledgement would not mean durable. */
const PROMISED = ['synchronous_commit', 'fsync', 'full_page_writes'] as const;

/** @throws Error where the server may lose what it acknowledges */
export async function assertDurable(): Promise<void> {
  await directoryTransaction(async ({ db }) => {
    for (const name of PROMISED) {
      const { rows } = await db.execute<{ value: string }>(sql`select current_setting(${name}) as value`);
      if (rows[0].value !== 'on')
        throw new Error(
          `PostgreSQL runs with ${name} = ${rows[0].value}; a 2xx would not mean durable. Set it to on.`,
        );
    }
  });
}
