import pg from 'pg';
import { log } from '@/lib/log/log';
import { loggable } from '@/lib/log/loggable';

/** How often a worker looks after the jobs of those who died. */
const EVERY_MS = 5_000;
/** A worker that takes a job in its first moment may not have said yet that it lives. */
const GRACE = '10 seconds';

const KEY = `hashtextextended('worker ' || $1::text, 0)`;

/** Workers, other than those given, that hold jobs for longer than the grace. */
const HOLDERS = `
  select distinct locked_by as id from graphile_worker.jobs
    where locked_at < now() - interval '${GRACE}' and locked_by <> all($1::text[])`;

/**
 * Who is alive among the workers. Each holds an advisory lock under its id in a session of its own: the server lets
 * go of it when the process is gone, however it went, and no clock and no busy event loop has a say. Jobs of whoever's
 * lock is free are handed back to the queue, which would otherwise wait for hours.
 */
export class Presence {
  private readonly ids = new Set<string>();
  private client: pg.Client | null = null;
  private timer: NodeJS.Timeout | null = null;
  private looking: Promise<void> | null = null;

  constructor(private readonly connectionString: string) {}

  /** A worker of this process. */
  async add(id: string): Promise<void> {
    this.ids.add(id);
    if (this.client) await hold(this.client, id);
  }

  /** Opens the session, and looks after the dead from now on. */
  async begin(): Promise<void> {
    await this.open();
    this.timer = setInterval(() => {
      this.looking ??= this.look().finally(() => {
        this.looking = null;
      });
    }, EVERY_MS);
  }

  async end(): Promise<void> {
    if (this.timer) clearInterval(this.timer);
    await this.looking;
    await this.client?.end();
  }

  private async open(): Promise<pg.Client> {
    const client = new pg.Client({ connectionString: this.connectionString, keepAlive: true });
    // The session is opened anew at the next look.
    client.on('error', () => undefined);
    client.once('end', () => {
      if (this.client === client) this.client = null;
    });
    await client.connect();
    for (const id of this.ids) await hold(client, id);
    this.client = client;
    return client;
  }

  private async look(): Promise<void> {
    try {
      const client = this.client ?? (await this.open());
      const { rows } = await client.query<{ id: string }>(HOLDERS, [[...this.ids]]);
      for (const { id } of rows) await handBack(client, id);
    } catch (error) {
      log().warn(loggable(error), 'presence not checked');
    }
  }
}

/** Holds a worker's lock; a session that cannot have it is closed, or the living would be taken for dead in it. */
async function hold(client: pg.Client, id: string): Promise<void> {
  try {
    await client.query(`select pg_advisory_lock(${KEY})`, [id]);
  } catch (error) {
    await client.end().catch(() => undefined);
    throw error;
  }
}

async function handBack(client: pg.Client, id: string): Promise<void> {
  const { rows } = await client.query<{ free: boolean }>(`select pg_try_advisory_lock(${KEY}) as free`, [id]);
  if (!rows[0].free) return;
  await client.query('select graphile_worker.force_unlock_workers(array[$1])', [id]);
  await client.query(`select pg_advisory_unlock(${KEY})`, [id]);
  log().warn({ worker: id }, 'jobs of a dead worker handed back');
}
