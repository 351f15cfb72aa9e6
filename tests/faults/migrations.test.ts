import { afterEach, beforeAll, beforeEach, describe, expect, inject, it } from 'vitest';
import { newDatabase } from '@/tests/setup/hub';
import { type Program, startProgram } from '@/tests/setup/program';
import { closeBarrier } from './barrier';
import { openSql, type Sql } from './sql';
import { until } from './until';
import './patience';

const WELL = { code: 0, signal: null };
/** The lock that migrations hold. */
const LOCK = 7_203_115;

/** Everything that migrations make, and who may use it. */
const CATALOGUE = `
  with ours as (select oid from pg_namespace where nspname in ('public', 'drizzle', 'graphile_worker'))
  select 'relation' as kind, c.oid::regclass::text as name,
      concat_ws(' ', relkind, relrowsecurity, relforcerowsecurity, relacl::text,
        (select string_agg(concat_ws(' ', attname, atttypid::regtype, attnotnull, attcompression), ', ' order by attnum)
          from pg_attribute where attrelid = c.oid and attnum > 0)) as details
    from pg_class c where relnamespace in (select oid from ours)
  union all select 'constraint', conrelid::regclass || ' ' || conname, pg_get_constraintdef(oid)
    from pg_constraint where connamespace in (select oid from ours)
  union all select 'policy', tablename || ' ' || policyname, concat_ws(' ', roles::text, cmd, qual, with_check)
    from pg_policies
  union all select 'function', proname, pg_get_functiondef(oid)
    from pg_proc where pronamespace in (select oid from ours) and proname <> 'stop_halfway'
  union all select 'migration', hash, created_at::text from drizzle.__drizzle_migrations
  order by 1, 2`;

/** Stops a migration halfway while somebody else holds a lock. */
const BARRIER_HALFWAY = `
  create function stop_halfway() returns event_trigger language plpgsql as
    $$ begin perform pg_advisory_xact_lock(1); end $$;
  create event trigger stop_halfway on ddl_command_end when tag in ('CREATE POLICY')
    execute function stop_halfway()`;

describe('migrations', () => {
  const cluster = inject('cluster');
  let complete: unknown[];
  let count = 0;
  let url: string;
  let sql: Sql;
  let migrate: () => Program;

  const within = (address: string, database: string) =>
    Object.assign(new URL(address), { pathname: `/${database}` }).href;

  beforeAll(async () => {
    // Not of the template itself: while somebody is connected to it, it cannot be copied.
    const copy = await openSql((await newDatabase(cluster, 'fault_migrated')).superuserUrl);
    complete = await copy.run(CATALOGUE);
    expect(complete.length).toBeGreaterThan(100);
    await copy.close();
  });
  beforeEach(async () => {
    const name = `fault_empty_${++count}`;
    const server = await openSql(cluster.superuserUrl);
    await server.run(`create database ${name} owner hubtack_owner template template0`);
    await server.close();
    url = within(cluster.superuserUrl, name);
    sql = await openSql(url);
    const environment = { DATABASE_OWNER_URL: within(cluster.ownerUrl, name) };
    migrate = () => startProgram('scripts/migrate.ts', environment);
  });
  afterEach(() => sql.close());

  it('that two processes begin at the same moment are done once', async () => {
    const barrier = await closeBarrier(url, `select pg_advisory_xact_lock(${LOCK})`);
    const both = [migrate(), migrate()];
    await barrier.waiting(2);
    await barrier.open();
    expect(await Promise.all(both.map(({ ended }) => ended))).toEqual([WELL, WELL]);
    expect(both.map(({ complaints }) => complaints())).toEqual(['', '']);
    expect(await sql.run(CATALOGUE)).toEqual(complete);
  });

  it('that were killed halfway are done by the next, which waits for the dead', async () => {
    await sql.run(BARRIER_HALFWAY);
    const barrier = await closeBarrier(url, 'select pg_advisory_xact_lock(1)');
    const killed = migrate();
    await barrier.waiting(1);
    expect(await killed.stop('SIGKILL')).toEqual({ code: null, signal: 'SIGKILL' });
    const next = migrate();
    await until('the next waits', async () => {
      const waiting = await sql.run(`select from pg_locks where not granted and objid = ${LOCK}`);
      return waiting.length > 0;
    });
    expect(await sql.run(`select from pg_tables where schemaname = 'public'`)).toEqual([]);
    await barrier.open();
    expect(await next.ended).toEqual(WELL);
    expect(await sql.run(CATALOGUE)).toEqual(complete);
  });
});
