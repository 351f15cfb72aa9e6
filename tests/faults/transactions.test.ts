import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { expectProblem } from '@/tests/api/fixtures/problems';
import { type Sent, send } from '@/tests/api/fixtures/send';
import { reckon } from '@/tests/bench/ledger';
import { closeBarrier } from './barrier';
import { type Stage, setStage } from './stage';
import './patience';

/** How many connections to its database a hub has. */
const CONNECTIONS = 8;
/** How long it lets a statement wait for a lock, and a request for a connection; and a while. */
const WAIT_MS = 2_000 + 4_000;

describe('a transaction that is broken off', () => {
  let stage: Stage;
  let last = 0;

  beforeAll(async () => {
    stage = await setStage('fault_transactions', { quiet: true });
  });
  afterEach(() => {
    // Where nobody expects an error the framework writes of it here.
    expect(stage.hub.complaints()).toBe('');
  });
  afterAll(async () => {
    await stage?.hub.stop();
    await stage?.close();
  });

  /** Ids that stop at the barrier and come with an Idempotency-Key: that must not be used up either. */
  const newIds = (count: number) => Array.from({ length: count }, () => `key-held-${++last}`);
  const post = (id: string) => stage.sender.send(stage.hub.url, id);
  const read = () =>
    send(`${stage.hub.url}/api/v1/projects`, { method: 'GET', headers: stage.sender.headers('') });
  const standing = () => reckon(stage.sender.ledger, stage.projectId, stage.sql);
  const close = (statement?: string) => closeBarrier(stage.database.superuserUrl, statement);

  async function endSessions(): Promise<void> {
    await stage.sql(
      `select pg_terminate_backend(pid) from pg_stat_activity
        where datname = current_database() and usename = 'hubtack_app'`,
    );
    await stage.untilLeft();
  }

  function expectUnavailable(answer: Sent): void {
    expectProblem(answer, 'unavailable');
    expect(Number(answer.headers['retry-after'])).toBeGreaterThan(0);
  }

  /** Nothing stands of what was refused, and sent once more it is taken. */
  async function expectRefusedWhole(ids: readonly string[]): Promise<void> {
    expect(await stage.sql('select from uploads where client_id = any($1)', [ids])).toEqual([]);
    expect(await standing()).toMatchObject({ lost: [], broken: [], strays: 0 });
    for (const id of ids) expect((await post(id)).status).toBe(201);
    expect(await standing()).toMatchObject({ lost: [], broken: [], unacknowledged: 0, strays: 0 });
  }

  it('because its session was ended before COMMIT answers 503 and has written nothing', async () => {
    const barrier = await close();
    const ids = newIds(3);
    const sent = ids.map(post);
    for (const session of await barrier.waiting(ids.length))
      await barrier.run('select pg_terminate_backend($1)', [session]);
    (await Promise.all(sent)).forEach(expectUnavailable);
    await barrier.open();
    await expectRefusedWhole(ids);
  });

  it('because its session was ended within a statement answers 503 and has written nothing', async () => {
    const barrier = await close('lock table uploads in exclusive mode');
    const [id] = newIds(1);
    const sent = post(id);
    const [session] = await barrier.waiting(1);
    await barrier.run('select pg_terminate_backend($1)', [session]);
    expectUnavailable(await sent);
    await barrier.open();
    await expectRefusedWhole([id]);
  });

  it('because a lock is held too long answers 503 in time and has written nothing', async () => {
    const barrier = await close('lock table uploads in exclusive mode');
    const ids = newIds(3);
    const asked = performance.now();
    (await Promise.all(ids.map(post))).forEach(expectUnavailable);
    expect(performance.now() - asked).toBeLessThan(WAIT_MS);
    await barrier.open();
    await expectRefusedWhole(ids);
  });

  it('because two wait for each other answers 503 and has written nothing', async () => {
    const barrier = await close();
    const [id] = newIds(1);
    const sent = post(id);
    await barrier.waiting(1);
    // Granted when the hub's transaction, which has waited longer, is the one that is given up.
    await barrier.run('lock table uploads in exclusive mode');
    expectUnavailable(await sent);
    await barrier.open();
    await expectRefusedWhole([id]);
  });

  it('is none yet where no connection is free: that answers 503, and the others go on', async () => {
    const barrier = await close();
    const sent = newIds(CONNECTIONS).map(post);
    await barrier.waiting(CONNECTIONS);
    const late = newIds(3);
    const asked = performance.now();
    (await Promise.all(late.map(post))).forEach(expectUnavailable);
    expect(performance.now() - asked).toBeLessThan(WAIT_MS);
    await barrier.open();
    for (const { status } of await Promise.all(sent)) expect(status).toBe(201);
    await expectRefusedWhole(late);
  });

  it('because another wrote the same first is done again and answers what that wrote', async () => {
    const barrier = await close();
    const [id] = newIds(1);
    const first = post(id);
    await barrier.waiting(1);
    const headers = { ...stage.sender.headers(id), 'Idempotency-Key': `other-${id}` };
    const second = send(stage.hub.url + stage.sender.path(), { headers, body: stage.sender.body(id) });
    await barrier.waiting(2);
    await barrier.open();
    expect([(await first).status, (await second).status]).toEqual([201, 200]);
    expect((await second).bytes.equals((await first).bytes)).toBe(true);
    expect(await standing()).toMatchObject({ lost: [], broken: [], unacknowledged: 0, strays: 0 });
  });

  it('is none where a session ends between transactions: the next request has another', async () => {
    expect((await read()).status).toBe(200);
    await endSessions();
    for (const { status } of await Promise.all([read(), read(), read()])) expect(status).toBe(200);
  });

  it('is not promised where the server no longer keeps what it acknowledges: the hub is not ready', async () => {
    await stage.sql('alter database fault_transactions set synchronous_commit = off');
    await endSessions();
    const answer = await fetch(`${stage.hub.url}/api/health/ready`);
    expect([answer.status, await answer.json()]).toEqual([503, { status: 'unavailable' }]);
  });
});
