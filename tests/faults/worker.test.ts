import { setTimeout as pause } from 'node:timers/promises';
import { afterAll, beforeAll, beforeEach, describe, expect, inject, it } from 'vitest';
import { closeDatabase } from '@/db/tenant';
import { type HubDatabase, newDatabase } from '@/tests/setup/hub';
import { callerRoles } from '@/tests/setup/roles';
import { closeBarrier, STOP_HERE, STOP_SWEEPS } from './barrier';
import { openSql, type Sql } from './sql';
import { until } from './until';
import { LONGER_AGO, startWorker, type Worker } from './workers';
import './patience';

const WELL = { code: 0, signal: null };

describe('the worker', () => {
  let database: HubDatabase;
  let organizationId: string;
  let workers: Worker[] = [];
  let sql: Sql['run'];
  let close: Sql['close'];

  const addJobs = (count = 1) =>
    sql(`select graphile_worker.add_job('sweep') from generate_series(1, $1)`, [count]);
  const jobs = () =>
    sql('select attempts, locked_at is not null as taken from graphile_worker._private_jobs order by id');
  const untilDone = () => until('the queue is empty', async () => (await jobs()).length === 0);
  const jobsDone = () => workers.reduce((sum, worker) => sum + worker.jobsDone(), 0);

  /** What there is to sweep. */
  const expired = () => sql('select from idempotency_keys');
  /** Holds sweeps in the middle of their work. */
  const holdSweeps = () => closeBarrier(database.superuserUrl);

  beforeAll(async () => {
    database = await newDatabase(inject('cluster'), 'fault_worker');
    ({ organizationId } = await callerRoles(database));
    await closeDatabase();
    ({ run: sql, close } = await openSql(database.superuserUrl));
    await sql(STOP_HERE);
    await sql(STOP_SWEEPS);
    // They make the queue's tables at the same moment.
    workers = await Promise.all([startWorker(database), startWorker(database)]);
    // The clock adds no sweep in between.
    await sql(`insert into graphile_worker._private_known_crontabs (identifier, known_since, last_execution)
      values ('sweep', now(), now() + interval '1 day')
      on conflict (identifier) do update set last_execution = excluded.last_execution`);
  });
  beforeEach(async () => {
    await sql(
      `insert into idempotency_keys (organization_id, actor_id, operation, key, fingerprint, status, created_at, expires_at)
        values ($1, $1, 'createProject', 'old', '', 201, now() - interval '2 days', now() - interval '1 day')`,
      [organizationId],
    );
  });
  afterAll(async () => {
    await Promise.all(workers.map((worker) => worker.stop()));
    await close();
  });

  it('survives the end of its connection in the middle of a job, and does that again', async () => {
    const barrier = await holdSweeps();
    await addJobs();
    const [session] = await barrier.waiting(1);
    await barrier.run(`select pg_terminate_backend(${session})`);
    await barrier.open();
    await untilDone();
    expect(await expired()).toEqual([]);
    for (const { child } of workers) expect(child).toMatchObject({ exitCode: null, signalCode: null });
  });

  it('runs a job once though there are two', async () => {
    const barrier = await holdSweeps();
    await addJobs();
    await barrier.waiting(1);
    expect(await jobs()).toEqual([{ attempts: 1, taken: true }]);
    await addJobs(20);
    await barrier.open();
    await untilDone();
    expect(await expired()).toEqual([]);
    const [first, second] = workers;
    expect(await second.stop()).toEqual(WELL);
    await until('the log tells of all', () => jobsDone() >= 1 + 21);
    expect(jobsDone()).toBe(1 + 21);
    workers = [first];
  });

  it('ends its job before it stops, and leaves the others', async () => {
    const [worker] = workers;
    const before = worker.jobsDone();
    const barrier = await holdSweeps();
    await addJobs();
    await barrier.waiting(1);
    const draining = worker.said(/worker draining/);
    worker.child.kill('SIGTERM');
    await draining;
    await addJobs();
    expect(await expired()).toHaveLength(1);
    await barrier.open();
    expect(await worker.ended).toEqual(WELL);
    expect(worker.jobsDone()).toBe(before + 1);
    expect(await expired()).toEqual([]);
    expect(await jobs()).toEqual([{ attempts: 0, taken: false }]);
  });

  it('leaves a job that it was killed in undone, for another to take as soon as it is known to be dead', async () => {
    const barrier = await holdSweeps();
    // It finds the job that was left.
    const killed = await startWorker(database);
    const [session] = await barrier.waiting(1);
    const other = await startWorker(database);
    await sql(LONGER_AGO);
    await killed.stop('SIGKILL');
    await barrier.open();
    await until('its session has ended', async () => {
      const sessions = await sql('select from pg_stat_activity where pid = $1', [session]);
      return sessions.length === 0;
    });
    await untilDone();
    await until('the log tells of it', () => other.jobsDone() === 1);
    expect(await other.stop()).toEqual(WELL);
    expect(other.count('jobs of a dead worker handed back')).toBe(1);
    expect(await expired()).toEqual([]);
  });

  it('keeps its job however long it takes, while another looks after the dead', async () => {
    const pair = await Promise.all([startWorker(database), startWorker(database)]);
    const barrier = await holdSweeps();
    await addJobs();
    await barrier.waiting(1);
    await sql(LONGER_AGO);
    // Longer than from one look to the next, and shorter than the barrier may hold.
    await pause(6_000);
    expect(await jobs()).toEqual([{ attempts: 1, taken: true }]);
    await barrier.open();
    await untilDone();
    for (const worker of pair) expect(await worker.stop()).toEqual(WELL);
    expect(pair.map((worker) => worker.jobsDone()).sort()).toEqual([0, 1]);
  });
});
