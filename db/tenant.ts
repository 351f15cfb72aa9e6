import type { Writable } from 'node:stream';
import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres';
import type { PoolClient, QueryConfig, QueryResult, QueryResultRow } from 'pg';
import { getConfig } from '@/lib/config';
import { closePool, openPool } from './client';
import { databaseFault } from './faults';

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

/** The SQLSTATE of statements behind one that has failed. */
const BEHIND_A_FAILURE = '25P02';

const UUID = /^[0-9a-f]{8}(?:-[0-9a-f]{4}){3}-[0-9a-f]{12}$/i;

/** Opens a transaction and sets its tenant; what follows comes in messages of its own. */
function open(organization: string): string {
  return `begin; select set_config('app.organization_id', ${organization}, true)`;
}

/** Runs `work` in one transaction of an organization and commits; rolls back where it throws. */
export function tenantTransaction<T>(
  organizationId: string,
  work: (tenant: Tenant) => Promise<T>,
): Promise<T> {
  if (!UUID.test(organizationId)) throw new Error('An organization has a UUID.');
  return transaction((client) => client.query(open(`'${organizationId}'`)), work);
}

/** The same for the organization that the directory knows under a handle's hash; of nobody's where it knows none. */
export function handleTransaction<T>(
  handleSha256: Buffer,
  kind: 'email' | 'invitation',
  work: (tenant: Tenant) => Promise<T>,
): Promise<T> {
  const handle = `'\\x${handleSha256.toString('hex')}'::bytea`;
  const organization = `(select organization_id::text from directory where handle_sha256 = ${handle} and kind = '${kind}')`;
  return transaction((client) => client.query(open(organization)), work);
}

/** Runs `work` outside every organization: it sees the directory and nothing else. */
export function directoryTransaction<T>(work: (tenant: Tenant) => Promise<T>): Promise<T> {
  return transaction((client) => client.query(open(`''`)), work);
}

/**
 * Runs `work` in a transaction whose first statement finds the tenant by a handle, sets it, and answers who that is:
 * what `work` reads at once travels in the same packet, and row security confines it to that tenant.
 */
export function identifiedTransaction<R extends object, T>(
  statement: NamedStatement,
  values: unknown[],
  work: (tenant: Tenant, identified: Promise<R[]>) => Promise<T>,
): Promise<T> {
  return transaction(
    (client) => Promise.all([client.query('begin'), client.query<R & QueryResultRow>(statement, values)]),
    (tenant, opened) =>
      work(
        tenant,
        opened.then(([, { rows }]) => rows),
      ),
  );
}

/** Ends all connections of this process. */
export const closeDatabase = closePool;

type Opening<O> = (client: PoolClient) => Promise<O>;
type Work<O, T> = (tenant: Tenant, opened: Promise<O>) => Promise<T>;

async function transaction<O, T>(opening: Opening<O>, work: Work<O, T>): Promise<T> {
  const client = await openPool(getConfig().databaseUrl).connect();
  let broken: Error | undefined;
  try {
    return await inTransaction(client, opening, work);
  } catch (error) {
    broken = await rollBack(client);
    throw error;
  } finally {
    client.release(broken);
  }
}

async function inTransaction<O, T>(client: PoolClient, opening: Opening<O>, work: Work<O, T>): Promise<T> {
  // Each is awaited below; until then a failure must not count as unhandled.
  const pending: Promise<unknown>[] = [];
  let firstFailure: unknown;
  const watched = <S extends Promise<unknown>>(statement: S): S => {
    statement.catch((error) => {
      firstFailure ??= error;
    });
    return statement;
  };
  const later = (statement: Promise<unknown>) => {
    pending.push(watched(statement));
  };
  gatherWrites(client);
  const opened = opening(client);
  later(opened);
  let db: NodePgDatabase | undefined;
  const tenant: Tenant = {
    // Made at first use: a hot path asks for named statements alone.
    get db() {
      db ??= drizzle(client);
      return db;
    },
    run: (statement, parameters) => {
      gatherWrites(client);
      return watched(client.query(statement, parameters));
    },
    defer: later,
  };
  try {
    const result = await work(tenant, opened);
    const commit = client.query('commit');
    commit.catch(() => undefined);
    await Promise.all(pending);
    if ((await commit).command !== 'COMMIT') throw new RolledBackError('The transaction was rolled back.');
    return result;
  } catch (error) {
    // What came behind a failure on the wire is refused for that alone: the failure itself tells why.
    throw databaseFault(error)?.sqlstate === BEHIND_A_FAILURE ? (firstFailure ?? error) : error;
  }
}

/** Statements sent in one turn of the event loop leave in one packet: system calls are what a small write costs. */
function gatherWrites(client: PoolClient): void {
  const { stream } = (client as unknown as { connection: { stream: Writable } }).connection;
  stream.cork();
  process.nextTick(() => stream.uncork());
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
