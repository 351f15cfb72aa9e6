import { execFile } from 'node:child_process';
import { promisify } from 'node:util';
import pg from 'pg';
import type { ProvidedContext } from 'vitest';
import type { TestProject } from 'vitest/node';
import { startThrowawayCluster, type ThrowawayCluster } from '../../scripts/host/cluster.mjs';
import { newDatabase, startHub } from './hub';

const template = 'hubtack_template';

declare module 'vitest' {
  interface ProvidedContext {
    cluster: {
      host: string;
      port: number;
      ownerPassword: string;
      appPassword: string;
      /** Connections to the database `postgres`; for another one change the path. */
      superuserUrl: string;
      ownerUrl: string;
      appUrl: string;
      binDirectory: string;
      /** The migrated database to copy, by `create database … template …` as the owner. */
      template: string;
    };
    /** A running hub for each vitest worker; see `ownHub`. */
    hubs: { url: string; appUrl: string; superuserUrl: string }[];
  }
}

export default async function setup(project: TestProject) {
  const cluster = await startThrowawayCluster();
  try {
    await makeTemplate(cluster);
    const ways = waysInto(cluster);
    project.provide('cluster', ways);
    const stopHubs = await provideHubs(project, ways);
    return async () => {
      await stopHubs();
      await cluster.stop();
    };
  } catch (error) {
    await cluster.stop();
    throw error;
  }
}

async function provideHubs(project: TestProject, ways: ProvidedContext['cluster']) {
  const workers = Array.from(
    { length: project.config.maxWorkers as number },
    (_, i) => `hubtack_worker_${i + 1}`,
  );
  const hubs = await Promise.all(workers.map(async (name) => startHub(await newDatabase(ways, name))));
  project.provide(
    'hubs',
    hubs.map(({ url, appUrl, superuserUrl }) => ({ url, appUrl, superuserUrl })),
  );
  return () => Promise.all(hubs.map((hub) => hub.stop()));
}

function waysInto(cluster: ThrowawayCluster): ProvidedContext['cluster'] {
  const { host, port, ownerPassword, appPassword, binDirectory } = cluster;
  return {
    host,
    port,
    ownerPassword,
    appPassword,
    superuserUrl: cluster.superuserUrl('postgres'),
    ownerUrl: cluster.ownerUrl('postgres'),
    appUrl: cluster.appUrl('postgres'),
    binDirectory,
    template,
  };
}

async function makeTemplate(cluster: ThrowawayCluster) {
  const client = new pg.Client({ connectionString: cluster.superuserUrl('postgres') });
  await client.connect();
  await client.query(`create database ${template} owner hubtack_owner template template0`);
  await client.end();
  // Its output comes with the error that execFile throws.
  await promisify(execFile)(process.execPath, ['--import', 'tsx', 'scripts/migrate.ts'], {
    env: { ...process.env, DATABASE_OWNER_URL: cluster.ownerUrl(template) },
  });
}
