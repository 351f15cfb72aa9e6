import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { api } from '@/tests/setup/api';
import { closeBarrier } from './barrier';
import { type Stage, setStage } from './stage';
import { until } from './until';
import { LONGER_AGO, startWorker, type Worker } from './workers';
import './patience';

const WELL = { code: 0, signal: null };

/** Jobs stop in the middle of writing their result. */
const STOP_RESULTS = `
  create trigger stop_results before insert on adjustment_results for each row execute function stop_here()`;

describe('a job', () => {
  let stage: Stage;
  let caller: ReturnType<typeof api>;
  const workers: Worker[] = [];

  beforeAll(async () => {
    stage = await setStage('fault_jobs');
    await stage.sql(STOP_RESULTS);
    caller = api(stage.hub.url, stage.key);
    await stage.sender.send(stage.hub.url, 'network');
  });
  afterEach(async () => {
    await Promise.all(workers.splice(0).map((worker) => worker.stop()));
  });
  afterAll(async () => {
    await stage.hub.stop();
    await stage.close();
  });

  const start = async () => {
    const network = { setups: 'all', datum: { kind: 'weighted' } };
    const { body } = await caller.post(`/projects/${stage.projectId}/adjustments`, network).expect(202);
    return body.id as string;
  };
  const worker = async () => {
    const started = await startWorker(stage.database);
    workers.push(started);
    return started;
  };
  const read = async (id: string) => (await caller.get(`/jobs/${id}`).expect(200)).body;
  const ended = (id: string) =>
    until('the job has ended', async () => {
      const job = await read(id);
      return job.finishedAt === null ? null : job;
    });
  const resultsOf = (id: string) =>
    stage.sql(
      `select from adjustment_results r join adjustments a on a.id = r.adjustment_id where a.job_id = $1`,
      [id],
    );
  const eventsOf = async (id: string) => {
    const rows = await stage.sql<{ type: string }>(
      `select type from events where subject = $1
        or subject = (select subject_id::text from jobs where id = $1::uuid) order by seq`,
      [id],
    );
    return rows.map(({ type }) => type);
  };
  const ONCE = ['adjustment.requested', 'adjustment.computed', 'job.succeeded'];

  it('is done though it was asked for before there was a worker', async () => {
    const id = await start();
    expect(await read(id)).toMatchObject({ status: 'queued' });
    await worker();
    expect(await ended(id)).toMatchObject({ status: 'succeeded', attempts: 1 });
    expect(await eventsOf(id)).toEqual(ONCE);
  });

  it('is taken again after its worker was killed in the middle, and has one result', async () => {
    const barrier = await closeBarrier(stage.database.superuserUrl);
    const killed = await worker();
    const id = await start();
    await barrier.waiting(1);
    expect(await read(id)).toMatchObject({ status: 'running', attempts: 1, progress: { done: 2, of: 3 } });
    await worker();
    await stage.sql(LONGER_AGO);
    await killed.stop('SIGKILL');
    await barrier.open();
    expect(await ended(id)).toMatchObject({ status: 'succeeded', attempts: 2, problem: null });
    expect(await resultsOf(id)).toHaveLength(1);
    expect(await eventsOf(id)).toEqual(ONCE);
  });

  it('is ended before its worker stops', async () => {
    const barrier = await closeBarrier(stage.database.superuserUrl);
    const asked = await worker();
    const id = await start();
    await barrier.waiting(1);
    const draining = asked.said(/worker draining/);
    asked.child.kill('SIGTERM');
    await draining;
    const left = await start();
    await barrier.open();
    expect(await asked.ended).toEqual(WELL);
    expect(await read(id)).toMatchObject({ status: 'succeeded', attempts: 1 });
    expect(await read(left)).toMatchObject({ status: 'queued', attempts: 0 });
    await worker();
    expect(await ended(left)).toMatchObject({ status: 'succeeded', attempts: 1 });
  });

  it('is cancelled while it runs: nothing of it is kept', async () => {
    // It cannot read what it needs; nothing holds its row meanwhile.
    const lock = 'lock table observations in access exclusive mode';
    const barrier = await closeBarrier(stage.database.superuserUrl, lock);
    await worker();
    const id = await start();
    await barrier.waiting(1);
    const { body } = await caller.post(`/jobs/${id}/cancel`).expect(200);
    expect(body).toMatchObject({ cancelRequested: true });
    await barrier.open();
    expect(await ended(id)).toMatchObject({ status: 'cancelled', result: null });
    expect(await resultsOf(id)).toEqual([]);
    expect(await eventsOf(id)).toEqual(['adjustment.requested', 'job.cancelRequested', 'job.cancelled']);
  });

  it('is neither queued nor there where its request was not committed', async () => {
    const count = async () => {
      const [row] = await stage.sql<{ jobs: number; queued: number }>(
        `select (select count(*)::int from jobs) as jobs,
          (select count(*)::int from graphile_worker._private_jobs) as queued`,
      );
      return row;
    };
    const before = await count();
    // Its events cannot be written: the last of what the request writes.
    const barrier = await closeBarrier(stage.database.superuserUrl, 'lock table events in exclusive mode');
    const network = { setups: 'all', datum: { kind: 'weighted' } };
    await caller.post(`/projects/${stage.projectId}/adjustments`, network).expect(503);
    await barrier.open();
    expect(await count()).toEqual(before);
  });
});
