import { once } from 'node:events';
import { Agent } from 'node:http';
import { connect } from 'node:net';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { reckon } from '@/tests/bench/ledger';
import { type Hub, newDatabase, startHub } from '@/tests/setup/hub';
import type { End } from '@/tests/setup/program';
import { closeBarrier } from './barrier';
import { keptConnections } from './connections';
import { Sender } from './sender';
import { type Stage, setStage } from './stage';
import { until } from './until';
import './patience';

const CONNECTIONS = 8;
/** Fewer than the hub has connections to its database. */
const HELD = 5;
/** How long requests under way may take after SIGTERM. */
const DRAIN_MS = 20_000;
/** Far less than that, and than connections are kept for. */
const AT_ONCE_MS = 5_000;
/** More than the system takes off a sender whose receiver does not read. */
const LARGE = 8 * 1024 * 1024;
const WELL: End = { code: 0, signal: null };

describe('the web process', () => {
  let stage: Stage;
  let hub: Hub;
  let held: Promise<{ end: End; afterMs: number }>;
  const agent = new Agent({ keepAlive: true });

  beforeAll(async () => {
    stage = await setStage('fault_web');
    hub = stage.hub;
    held = stopWhileHeld();
    // Awaited by the last test.
    held.catch(() => undefined);
  });
  afterAll(async () => {
    agent.destroy();
    await hub?.stop();
    await stage?.close();
  });

  /** Asks another process to stop while a client has sent a part of its request and never sends the rest. */
  async function stopWhileHeld() {
    const other = await startHub(await newDatabase(inject('cluster'), 'fault_web_held'));
    const { answered, taken } = keptConnections(
      other.url,
      agent,
      new Sender(stage.projectId, stage.key),
    ).begin('never', 10);
    await taken();
    const asked = performance.now();
    const end = await other.stop();
    await expect(answered).rejects.toThrow();
    return { end, afterMs: performance.now() - asked };
  }

  const standing = () => reckon(stage.sender.ledger, stage.projectId, stage.sql);
  /** Numbers uploads; every other one has an Idempotency-Key besides its client id. */
  function numbered(name: string): () => string {
    let count = 0;
    return () => `${count % 2 ? 'key' : 'cut'}-${name}-${++count}`;
  }

  it('killed in the middle of uploads has kept what it acknowledged, whole, and nothing by halves', async () => {
    const { sender } = stage;
    const { sent, acknowledged } = sender.ledger;
    const load = sender.sendMany(hub.url, CONNECTIONS, numbered('free'));
    await until('20 are acknowledged', () => acknowledged.size >= 20);
    // Some have written everything and only COMMIT is left; the others are wherever they are.
    const barrier = await closeBarrier(stage.database.superuserUrl);
    const atBarrier = sender.sendMany(hub.url, HELD, numbered('held'));
    await barrier.waiting(HELD);
    await hub.stop('SIGKILL');
    await Promise.all([load, atBarrier]);
    await barrier.open();
    await stage.untilLeft();
    expect(sent.size).toBeGreaterThanOrEqual(acknowledged.size + HELD);
    expect(await standing()).toMatchObject({ lost: [], broken: [], strays: 0 });
  });

  it('started again answers the same documents as before, and keeps none of them twice', async () => {
    hub = await startHub(stage.database);
    const { sender } = stage;
    const acknowledged = new Set(sender.ledger.acknowledged);
    const first = new Map(sender.answers);
    for (const id of sender.ledger.sent) {
      const answer = await sender.send(hub.url, id);
      expect([200, 201]).toContain(answer.status);
      if (!acknowledged.has(id)) continue;
      expect(answer.bytes.equals(first.get(id)!.bytes)).toBe(true);
      expect(answer.status).toBe(id.startsWith('key-') ? 201 : 200);
    }
    const { size } = sender.ledger.sent;
    const whole = { acknowledged: size, lost: [], broken: [], unacknowledged: 0, strays: 0 };
    expect(await standing()).toMatchObject(whole);
    const [{ n }] = await stage.sql<{ n: number }>('select count(*)::int as n from uploads');
    expect(n).toBe(size);
  });

  it('asked to stop answers what is under way, takes nothing new, and ends with 0 after the last answer', async () => {
    const { sender, database } = stage;
    const before = sender.ledger.acknowledged.size;
    const { begin, beginLarge, leaveIdle } = keptConnections(hub.url, agent, sender);
    await Promise.all([leaveIdle(), leaveIdle(), leaveIdle()]);
    const large = await beginLarge('large', LARGE);
    const barrier = await closeBarrier(database.superuserUrl);
    const written = [1, 2, 3, 4].map((n) => begin(`held-last-${n}`));
    const halfSent = begin('half-sent', 10);
    await halfSent.taken();
    await barrier.waiting(written.length);

    const draining = hub.said(/web draining/);
    hub.child.kill('SIGTERM');
    await draining;
    const [refusal] = await once(connect(Number(new URL(hub.url).port), '127.0.0.1'), 'error');
    expect(refusal).toMatchObject({ code: 'ECONNREFUSED' });
    await barrier.open();
    halfSent.finish();
    const answers = await Promise.all([...written, halfSent].map(({ answered }) => answered));
    expect(answers).toEqual(answers.map(() => ({ status: 201, connection: 'close' })));
    expect(large.sent.equals(await large.rest())).toBe(true);

    const answered = performance.now();
    expect(await hub.ended).toEqual(WELL);
    expect(performance.now() - answered).toBeLessThan(AT_ONCE_MS);
    const whole = { acknowledged: before + 6, lost: [], broken: [], unacknowledged: 0, strays: 0 };
    expect(await standing()).toMatchObject(whole);
  });

  it('asked to stop ends with 0 within its time though a client never finishes', async () => {
    const { end, afterMs } = await held;
    expect(end).toEqual(WELL);
    expect(afterMs).toBeLessThan(DRAIN_MS + AT_ONCE_MS);
  });
});
