import pg from 'pg';
import { startProgram } from './program';

/** Signs the sessions of test hubs. */
export const TEST_SECRET = 'test-secret-of-forty-three-characters-at-least';

export type Hub = Awaited<ReturnType<typeof startHub>>;

/** The ways into a hub's database, as the app role and past all row security. */
export interface HubDatabase {
  appUrl: string;
  superuserUrl: string;
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
): Promise<HubDatabase> {
  const client = new pg.Client({ connectionString: cluster.superuserUrl });
  await client.connect();
  await client.query(`create database ${name} owner hubtack_owner template ${cluster.template}`);
  await client.end();
  return {
    appUrl: withDatabase(cluster.appUrl, name),
    superuserUrl: withDatabase(cluster.superuserUrl, name),
  };
}

/** What a program of the hub is told, beside the machine's own environment. */
export function environmentOf(
  database: Pick<HubDatabase, 'appUrl'>,
  further: Record<string, string> = {},
): Record<string, string> {
  return {
    NODE_ENV: 'production',
    DATABASE_URL: database.appUrl,
    HUBTACK_SECRET: TEST_SECRET,
    HUBTACK_VALIDATE_ANSWERS: '1',
    HOST: '127.0.0.1',
    PORT: '0',
    ...further,
  };
}

/**
 * Starts the built web application on a database and waits until it listens.
 *
 * @param quiet problems of the hub's own making are not shown: the caller brings them about
 */
export async function startHub(
  database: HubDatabase,
  { environment = {}, quiet = false }: { environment?: Record<string, string>; quiet?: boolean } = {},
) {
  const program = startProgram('scripts/web.ts', environmentOf(database, environment));
  const [, port] = await program.said(/"port":(\d+),"msg":"web ready"/);
  program.listen(quiet ? null : showFaults);
  return { url: `http://127.0.0.1:${port}`, ...database, ...program };
}

/** Problems of the hub's own making are worth seeing beside the test that met them. */
function showFaults(line: string): void {
  if (line.includes('"level":"error"')) console.error(line);
}
