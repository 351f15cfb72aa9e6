import { execFile } from 'node:child_process';
import { promisify } from 'node:util';
import pg from 'pg';
import { closeDatabase } from '@/db/tenant';
import { startHub } from '@/tests/setup/hub';
import { callerRoles } from '@/tests/setup/roles';
import { startThrowawayCluster, type ThrowawayCluster } from '../../scripts/host/cluster.mjs';

const DATABASE = 'hubtack_bench';

export interface Stage {
  cluster: ThrowawayCluster;
  ownerUrl: string;
  superuserUrl: string;
  hub: Awaited<ReturnType<typeof startHub>>;
  key: string;
  /** Runs SQL past all row security. */
  sql: <R extends pg.QueryResultRow>(text: string, values?: unknown[]) => Promise<R[]>;
  end(): Promise<void>;
}

/** A cluster, a migrated database, one web process as it is run for real, and an organization with a key. */
export async function setStage(): Promise<Stage> {
  const cluster = await startThrowawayCluster();
  const [ownerUrl, superuserUrl] = [cluster.ownerUrl(DATABASE), cluster.superuserUrl(DATABASE)];
  await query(cluster.superuserUrl('postgres'), `create database ${DATABASE} owner hubtack_owner`);
  await promisify(execFile)(process.execPath, ['--import', 'tsx', 'scripts/migrate.ts'], {
    env: { ...process.env, DATABASE_OWNER_URL: ownerUrl },
  });
  const database = { appUrl: cluster.appUrl(DATABASE), superuserUrl };
  const hub = await startHub(database, { environment: { HUBTACK_VALIDATE_ANSWERS: '0' }, quiet: true });
  const { key } = await callerRoles(database);
  await closeDatabase();
  return {
    cluster,
    ownerUrl,
    superuserUrl,
    hub,
    key,
    sql: (text, values) => query(superuserUrl, text, values),
    end: async () => {
      await hub.stop();
      await cluster.stop();
    },
  };
}

async function query<R extends pg.QueryResultRow>(
  connectionString: string,
  text: string,
  values?: unknown[],
) {
  const client = new pg.Client({ connectionString });
  await client.connect();
  try {
    return (await client.query<R>(text, values)).rows;
  } finally {
    await client.end();
  }
}
