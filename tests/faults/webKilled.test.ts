import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { reckon } from '@/tests/bench/ledger';
import { type Hub, startHub } from '@/tests/setup/hub';
import { closeBarrier } from './barrier';
import { type Stage, setStage } from './stage';
import { until } from './until';
import './patience';

const CONNECTIONS = 8;
/** Fewer than the hub has connections to its database. */
const HELD = 5;

describe('a web process that is killed in the middle of uploads', () => {
  let stage: Stage;
  let hub: Hub;
  let count = 0;
  /** Every other upload has an Idempotency-Key besides its client id. */
  const next = () => `${count % 2 ? 'key' : 'cut'}-${++count}`;

  beforeAll(async () => {
    stage = await setStage('fault_web_killed');
    hub = stage.hub;
  });
  afterAll(async () => {
    await hub?.stop();
    await stage?.close();
  });

  const standing = () => reckon(stage.sender.ledger, stage.projectId, stage.sql);

  it('keeps what it acknowledged, whole and once, and nothing by halves', async () => {
    const { sender } = stage;
    const { sent, acknowledged } = sender.ledger;
    const load = sender.sendMany(hub.url, CONNECTIONS, next);
    await until('40 are acknowledged', () => acknowledged.size >= 40);
    // Some have written everything and only COMMIT is left; the others are wherever they are.
    const barrier = await closeBarrier(stage.database.superuserUrl);
    let held = 0;
    const holding = sender.sendMany(hub.url, HELD, () => `${held % 2 ? 'key' : 'cut'}-held-${++held}`);
    await barrier.waiting(HELD);
    await hub.stop('SIGKILL');
    await Promise.all([load, holding]);
    await barrier.open();
    await stage.untilLeft();
    expect(sent.size).toBeGreaterThanOrEqual(acknowledged.size + HELD);
    expect(await standing()).toMatchObject({ lost: [], broken: [], strays: 0 });
  });

  it('answers the same documents as before when it runs again, and keeps none of them twice', async () => {
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
});
