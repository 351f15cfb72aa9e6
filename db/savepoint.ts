import { sql } from 'drizzle-orm';
import type { Tenant } from './tenant';

/**
 * Runs `work` within a transaction so that its failure takes back what it wrote and nothing else. What it defers is
 * waited for here.
 *
 * @throws what `work` threw; the transaction goes on, unless it had failed before
 */
export async function inSavepoint<T>(tenant: Tenant, work: (tenant: Tenant) => Promise<T>): Promise<T> {
  const { db, run } = tenant;
  const writes: Promise<unknown>[] = [];
  const defer = (write: Promise<unknown>) => {
    write.catch(() => undefined);
    writes.push(write);
  };
  await db.execute(sql`savepoint aside`);
  try {
    const result = await work({ db, run, defer });
    await Promise.all(writes);
    await db.execute(sql`release savepoint aside`);
    return result;
  } catch (error) {
    await Promise.allSettled(writes);
    await db.execute(sql`rollback to savepoint aside`);
    throw error;
  }
}
