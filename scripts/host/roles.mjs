import { scramVerifier } from './scram.mjs';

export const ownerRole = 'hubtack_owner';
export const appRole = 'hubtack_app';

/** Opens one connection for the length of the work. The driver is there only after `npm ci`, hence the import. */
export async function withConnection(url, work) {
  const { default: pg } = await import('pg');
  const client = new pg.Client({ connectionString: url, connectionTimeoutMillis: 10_000 });
  // A connection that breaks fails the query under way; without a listener it would end the process.
  client.on('error', () => {});
  await client.connect();
  try {
    return await work(client);
  } finally {
    await client.end();
  }
}

export async function roleExists(client, name) {
  const { rowCount } = await client.query('select from pg_roles where rolname = $1', [name]);
  return rowCount > 0;
}

/** Makes the role with these rights, or gives the one that is there this password. */
export async function ensureRole(client, name, password, rights) {
  const verb = (await roleExists(client, name)) ? `alter role ${name}` : `create role ${name} ${rights}`;
  await client.query(`${verb} login password '${scramVerifier(password)}'`);
}

export const ownerRights = 'nosuperuser createdb nocreaterole noreplication nobypassrls';
export const appRights = 'nosuperuser nocreatedb nocreaterole noreplication nobypassrls';

/** The two roles of a cluster of ours. As a member the owner can hand a schema to the app's role. */
export async function ensureRoles(client, { ownerPassword, appPassword }) {
  await ensureRole(client, ownerRole, ownerPassword, ownerRights);
  await ensureRole(client, appRole, appPassword, appRights);
  await client.query(`grant ${appRole} to ${ownerRole}`);
}

export async function ensureDatabase(client, name) {
  const { rowCount } = await client.query('select from pg_database where datname = $1', [name]);
  if (rowCount === 0) await client.query(`create database ${name} owner ${ownerRole} template template0`);
}
