import { Pool, types } from 'pg';

const TIMESTAMPTZ = 1184;
const INT8 = 20;

/** Instants stay text (microseconds); 64-bit integers here are counters that a double holds. */
const parsers = {
  getTypeParser: ((oid: number, format?: 'text' | 'binary') => {
    if (oid === TIMESTAMPTZ) return (text: string) => text;
    if (oid === INT8) return Number;
    return types.getTypeParser(oid, format as 'text');
  }) as typeof types.getTypeParser,
};

const holder = globalThis as typeof globalThis & { hubtackPool?: Pool };

/**
 * The pool of this process, kept on the global object because the framework may load a module more than once.
 * Only db/tenant.ts takes connections from it.
 */
export function openPool(databaseUrl: string): Pool {
  if (!holder.hubtackPool) {
    holder.hubtackPool = new Pool({
      connectionString: databaseUrl,
      max: 8,
      // Statements are sent without waiting for the answers of those before.
      pipeline: true,
      connectionTimeoutMillis: 2_000,
      statement_timeout: 10_000,
      lock_timeout: 2_000,
      idle_in_transaction_session_timeout: 15_000,
      options: '-c TimeZone=UTC -c plan_cache_mode=force_generic_plan',
      types: parsers,
    });
    // An idle connection that the server ends is replaced at the next use.
    holder.hubtackPool.on('error', () => undefined);
    // One that ends in use fails its statements; unheard it would end the process, too.
    holder.hubtackPool.on('connect', (client) => client.on('error', () => undefined));
  }
  return holder.hubtackPool;
}

export async function closePool(): Promise<void> {
  await holder.hubtackPool?.end();
  holder.hubtackPool = undefined;
}
