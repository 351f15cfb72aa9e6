import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { expectProblem } from '@/tests/api/fixtures/problems';
import { type Sent, send } from '@/tests/api/fixtures/send';
import { reckon } from '@/tests/bench/ledger';
import { newSite } from '@/tests/bench/site';
import { type Stage, setStage } from '@/tests/bench/stage';
import { environmentOf } from '@/tests/setup/hub';
import { type Program, startProgram } from '@/tests/setup/program';
import { closeBarrier, STOP_HERE, STOP_SWEEPS } from './barrier';
import { Sender } from './sender';
import { until } from './until';
import './patience';

const CONNECTIONS = 8;

/** What there is for the worker to sweep. */
const EXPIRED = `
  insert into idempotency_keys (organization_id, actor_id, operation, key, fingerprint, status, created_at, expires_at)
    select organization_id, subject_id, 'createProject', 'old', '', 201, now() - interval '2 days', now() - interval '1 day'
    from directory limit 1`;

describe('a hub whose PostgreSQL is gone', () => {
  let stage: Stage;
  let sender: Sender;
  let projectId: string;
  let workers: Program[] = [];

  beforeAll(async () => {
    stage = await setStage();
    ({ projectId } = await newSite(stage.hub.url, stage.key, 'Gone'));
    sender = new Sender(projectId, stage.key);
    workers = await Promise.all([startWorker(), startWorker()]);
    await stage.sql(STOP_HERE);
    await stage.sql(STOP_SWEEPS);
    await stage.sql(EXPIRED);
  });
  afterAll(async () => {
    await Promise.all(workers.map((worker) => worker.stop()));
    await stage?.end();
  });

  async function startWorker(): Promise<Program> {
    const appUrl = stage.cluster.appUrl('hubtack_bench');
    const worker = startProgram('scripts/worker.ts', environmentOf({ appUrl }));
    await worker.said(/worker ready/);
    return worker;
  }

  const addJob = () => stage.sql(`select graphile_worker.add_job('sweep')`);
  const get = (path: string) => send(stage.hub.url + path, { method: 'GET', headers: sender.headers('') });

  function expectUnavailable(answer: Sent): void {
    expectProblem(answer, 'unavailable');
    expect(Number(answer.headers['retry-after'])).toBeGreaterThan(0);
  }

  it('refuses with 503 what it cannot do, and says so to who asks after its health', async () => {
    let count = 0;
    let load = true;
    const sending = sender.sendMany(stage.hub.url, CONNECTIONS, () => (load ? `gone-${++count}` : null));
    await until('some are acknowledged', () => sender.ledger.acknowledged.size >= 40);
    // One of the workers is in the middle of a job.
    const barrier = await closeBarrier(stage.superuserUrl);
    await addJob();
    await barrier.waiting(1);
    await stage.cluster.kill('SIGKILL');
    await until('some are refused', () => [...sender.answers.values()].some(({ status }) => status === 503));
    load = false;
    await sending;
    // None broke off.
    expect(sender.answers.size).toBe(sender.ledger.sent.size);
    for (const answer of sender.answers.values()) if (answer.status !== 201) expectUnavailable(answer);

    const live = await get('/api/health/live');
    expect([live.status, live.body]).toEqual([200, { status: 'live' }]);
    const ready = await get('/api/health/ready');
    expect([ready.status, ready.body]).toEqual([503, { status: 'unavailable' }]);
    expect(Number(ready.headers['retry-after'])).toBeGreaterThan(0);
    for (const path of ['/whoami', '/hub', '/events', '/projects', `/projects/${projectId}/setups`])
      expectUnavailable(await get(`/api/v1${path}`));
    const signIn = { email: 'nobody@test.example', password: 'three quiet herons' };
    const headers = { 'Content-Type': 'application/json' };
    const path = `${stage.hub.url}/api/v1/sessions`;
    expectUnavailable(await send(path, { headers, body: JSON.stringify(signIn) }));
  });

  it('serves again in the same process when it is back, and has lost nothing that it acknowledged', async () => {
    await stage.cluster.restart();
    await until('it is ready', async () => (await get('/api/health/ready')).status === 200);
    for (const id of sender.ledger.sent) {
      const { status } = await sender.send(stage.hub.url, id);
      expect([200, 201]).toContain(status);
    }
    expect(stage.hub.child).toMatchObject({ exitCode: null, signalCode: null });
    expect(stage.hub.complaints()).toBe('');
    const standing = await reckon(sender.ledger, projectId, stage.sql);
    expect(standing).toMatchObject({ lost: [], broken: [], unacknowledged: 0, strays: 0 });
  });

  it('has a worker that goes on, and one that gave up where it could not say what became of its job', async () => {
    const [busy, end] = await Promise.race(
      workers.map(async (worker) => [worker, await worker.ended] as const),
    );
    expect(end).toEqual({ code: 1, signal: null });
    const idle = workers.find((worker) => worker !== busy)!;
    const done = idle.said(/"task":"sweep".*"job done"/);
    await addJob();
    await done;
    expect(idle.child).toMatchObject({ exitCode: null, signalCode: null });
    expect(await stage.sql('select from idempotency_keys')).toEqual([]);
  });
});
