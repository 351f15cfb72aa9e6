import { openSql } from './sql';
import { until } from './until';

export type Barrier = Awaited<ReturnType<typeof closeBarrier>>;

/** A trigger's function that waits while the barrier is closed, for longer than the hub lets its statements wait. */
export const STOP_HERE = `
  create function stop_here() returns trigger language plpgsql set lock_timeout = '9s' as
    $$ begin perform pg_advisory_xact_lock_shared(1); return coalesce(new, old); end $$`;

/** Sweeps stop in the middle of their work. */
export const STOP_SWEEPS = `
  create trigger stop_sweeps before delete on idempotency_keys for each row execute function stop_here()`;

const WAITING = `
  with recursive queue (pid) as (
    select pg_backend_pid()
    union select l.pid from queue, pg_locks l where not l.granted and queue.pid = any(pg_blocking_pids(l.pid)))
  select pid from queue where pid <> pg_backend_pid()`;

/**
 * Closes the barrier of STOP_HERE, or takes other locks, in a transaction of its own, so that others stop where the
 * test wants them.
 */
export async function closeBarrier(superuserUrl: string, statement = 'select pg_advisory_xact_lock(1)') {
  const { run, close } = await openSql(superuserUrl);
  await run('begin');
  await run(statement);
  return {
    run,
    /** Waits until so many sessions stand before it, or behind others who do, and answers their process ids. */
    waiting: (sessions: number) =>
      until(`${sessions} sessions wait`, async () => {
        const waiting = await run<{ pid: number }>(WAITING);
        return waiting.length >= sessions ? waiting.map(({ pid }) => pid) : null;
      }),
    async open() {
      await run('rollback');
      await close();
    },
  };
}
