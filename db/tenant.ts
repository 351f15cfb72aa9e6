import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres';
import type { PoolClient, QueryConfig, QueryResult, QueryResultRow } from 'pg';
import { getConfig } from '@/lib/config';
import { closePool, openPool } from './client';

/** A statement of a hot path, prepared under its name once a connection. */
export interface NamedStatement extends QueryConfig {
  name: string;
  text: string;
}

/** A transaction that sees one organization's rows alone. */
export interface Tenant {
  readonly db: NodePgDatabase;
  /** Sends a named statement at once, behind those sent before. */
  run<R extends QueryResultRow>(statement: NamedStatement, values: unknown[]): Promise<QueryResult<R>>;
  /** A write whose answer nobody waits for: COMMIT follows it on the wire, and its failure fails the whole. */
  defer(write: Promise<unknown>): void;
}

/** COMMIT of a failed transaction succeeds with the tag ROLLBACK: then nothing was written. */
export class RolledBackError extends Error {
  override readonly name = 'RolledBackError';
}

const OPEN: NamedStatement = {
  name: 'tenant_open',
  text: `select set_config('app.organization_id', $1, true)`,
};

const OPEN_BY_HANDLE: NamedStatement = {
  name: 'tenant_open_by_handle',
  text: `select set_config('app.organization_id',
    (select organization_id::text from directory where handle_sha256 = $1 and kind = $2), true)`,
};

/** Runs `work` in one transaction of an organization and commits; rolls back where it throws. */
export function tenantTransaction<T>(
  organizationId: string,
  work: (tenant: Tenant) => Promise<T>,
): Promise<T> {
  return transaction(OPEN, [organizationId], work);
}

/** The same for the organization that the directory knows under a handle's hash; of nobody's where it knows none. */
export function handleTransaction<T>(
  handleSha256: Buffer,
  kind: 'email' | 'apiKey' | 'session' | 'invitation',
  work: (tenant: Tenant) => Promise<T>,
): Promise<T> {
  return transaction(OPEN_BY_HANDLE, [handleSha256, kind], work);
}

/** Runs `work` outside every organization: it sees the directory and nothing else. */
export function directoryTransaction<T>(work: (tenant: Tenant) => Promise<T>): Promise<T> {
  return transaction(OPEN, [''], work);
}

/** Ends all connections of this process. */
export const closeDatabase = closePool;

async function transaction<T>(
  open: NamedStatement,
  values: unknown[],
  work: (tenant: Tenant) => Promise<T>,
): Promise<T> {
  const client = await openPool(getConfig().databaseUrl).connect();
  let broken: Error | undefined;
  try {
    return await inTransaction(client, open, values, work);
  } catch (error) {
    broken = await rollBack(client);
    throw error;
  } finally {
    client.release(broken);
  }
}

async function inTransaction<T>(
  client: PoolClient,
  open: NamedStatement,
  values: unknown[],
  work: (tenant: Tenant) => Promise<T>,
): Promise<T> {
  const pending: Promise<unknown>[] = [client.query('begin'), client.query(open, values)];
  // Each is awaited below; until then a failure must not count as unhandled.
  for (const statement of pending) statement.catch(() => undefined);
  const result = await work({
    db: drizzle(client),
    run: (statement, parameters) => client.query(statement, parameters),
    defer: (write) => {
      write.catch(() => undefined);
      pending.push(write);
    },
  });
  const commit = client.query('commit');
  commit.catch(() => undefined);
  await Promise.all(pending);
  if ((await commit).command !== 'COMMIT') throw new RolledBackError('The transaction was rolled back.');
  return result;
}

/** Answers the error that makes the connection unfit for further use. */
async function rollBack(client: PoolClient): Promise<Error | undefined> {
  try {
    await client.query('rollback');
    return undefined;
  } catch (error) {
    return error instanceof Error ? error : new Error('rollback failed');
  }
}
