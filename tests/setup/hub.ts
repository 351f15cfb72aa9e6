import { type ChildProcess, spawn } from 'node:child_process';
import { createInterface } from 'node:readline';
import pg from 'pg';

/** Signs the sessions of test hubs. */
export const TEST_SECRET = 'test-secret-of-forty-three-characters-at-least';

export interface Hub {
  url: string;
  /** Connection of the app role to the hub's database. */
  appUrl: string;
  superuserUrl: string;
  child: ChildProcess;
  stop(): Promise<void>;
}

function withDatabase(url: string, database: string): string {
  const changed = new URL(url);
  changed.pathname = `/${database}`;
  return changed.href;
}

/** Copies the migrated template into a database of its own and answers the ways into it. */
export async function newDatabase(
  cluster: { superuserUrl: string; appUrl: string; template: string },
  name: string,
) {
  const client = new pg.Client({ connectionString: cluster.superuserUrl });
  await client.connect();
  await client.query(`create database ${name} owner hubtack_owner template ${cluster.template}`);
  await client.end();
  return {
    appUrl: withDatabase(cluster.appUrl, name),
    superuserUrl: withDatabase(cluster.superuserUrl, name),
  };
}

/** Starts the built web application on a database and waits until it listens. */
export async function startHub(database: { appUrl: string; superuserUrl: string }): Promise<Hub> {
  const child = spawn(process.execPath, ['--import', 'tsx', 'scripts/web.ts'], {
    env: {
      ...process.env,
      NODE_ENV: 'production',
      DATABASE_URL: database.appUrl,
      HUBTACK_SECRET: TEST_SECRET,
      HUBTACK_VALIDATE_ANSWERS: '1',
      HOST: '127.0.0.1',
      PORT: '0',
    },
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  const port = await new Promise<number>((resolve, reject) => {
    child.once('exit', (code) => reject(new Error(`The web application ended with ${code}.`)));
    createInterface({ input: child.stdout! }).on('line', (line) => {
      // Problems of the hub's own making are worth seeing beside the test that met them.
      if (line.includes('"level":"error"')) console.error(line);
      const ready = /"port":(\d+),"msg":"web ready"/.exec(line);
      if (ready) resolve(Number(ready[1]));
    });
  });
  const stop = () =>
    new Promise<void>((resolve) => {
      if (child.exitCode !== null || child.signalCode !== null) return resolve();
      child.once('exit', () => resolve());
      child.kill('SIGTERM');
    });
  return { url: `http://127.0.0.1:${port}`, ...database, child, stop };
}
