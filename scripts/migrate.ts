import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate } from 'drizzle-orm/node-postgres/migrator';
import { Client } from 'pg';

/** Held while migrating, so that two processes that start at once do not both migrate. */
const LOCK = 7_203_115;

const connectionString = process.env.DATABASE_OWNER_URL;
if (!connectionString) {
  console.error('DATABASE_OWNER_URL is not set: the connection of the role that owns the tables.');
  process.exit(1);
}
const client = new Client({ connectionString });
await client.connect();
try {
  await client.query('select pg_advisory_lock($1)', [LOCK]);
  await migrate(drizzle(client), { migrationsFolder: new URL('../db/migrations', import.meta.url).pathname });
} finally {
  await client.end();
}
