import { inject } from 'vitest';
import { closeDatabase } from '@/db/tenant';
import { newSite } from '@/tests/bench/site';
import { newDatabase, startHub } from '@/tests/setup/hub';
import { callerRoles } from '@/tests/setup/roles';
import { STOP_HERE } from './barrier';
import { Sender } from './sender';
import { openSql } from './sql';
import { until } from './until';

export type Stage = Awaited<ReturnType<typeof setStage>>;

/** Uploads whose client id says `held` stop at the barrier when all their rows are written and COMMIT alone is left. */
const AT_COMMIT = `
  create constraint trigger stop_at_commit after insert on uploads deferrable initially deferred
    for each row when (new.client_id like '%held%') execute function stop_here()`;

/**
 * A hub on a database of its own with a project that takes uploads.
 *
 * @param quiet the hub's problems are the test's doing and not shown; its log cannot be waited for
 */
export async function setStage(name: string, { quiet = false } = {}) {
  const database = await newDatabase(inject('cluster'), name);
  const { key } = await callerRoles(database);
  await closeDatabase();
  const hub = await startHub(database, { quiet });
  const { projectId } = await newSite(hub.url, key, 'Fault');
  const { run: sql, close } = await openSql(database.superuserUrl);
  await sql(STOP_HERE);
  await sql(AT_COMMIT);
  return {
    database,
    hub,
    key,
    projectId,
    sender: new Sender(projectId, key),
    sql,
    /** Waits until the server has noticed that its clients are gone. */
    untilLeft: () =>
      until('the sessions of the app role have ended', async () => {
        const left = await sql(
          `select from pg_stat_activity where datname = current_database() and usename = 'hubtack_app'`,
        );
        return left.length === 0;
      }),
    close,
  };
}
