import { once } from 'node:events';
import { Agent, type ClientRequest, get, type IncomingMessage, request } from 'node:http';
import { connect } from 'node:net';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { reckon } from '@/tests/bench/ledger';
import { startHub } from '@/tests/setup/hub';
import { closeBarrier } from './barrier';
import { type Stage, setStage } from './stage';
import './patience';

const DRAIN_MS = 20_000;
/** Far less than requests under way may take, and than connections are kept for. */
const AT_ONCE_MS = 5_000;
/** More than the system takes off a sender whose receiver does not read. */
const LARGE = 8 * 1024 * 1024;

describe('a web process that is asked to stop', () => {
  let stage: Stage;
  const agent = new Agent({ keepAlive: true });

  beforeAll(async () => {
    stage = await setStage('fault_web_stopped');
  });
  afterAll(async () => {
    agent.destroy();
    await stage?.hub.stop();
    await stage?.close();
  });

  async function responseTo(sent: ClientRequest): Promise<IncomingMessage> {
    const [response] = await once(sent, 'response');
    return response;
  }

  /** Starts an upload over a connection that is kept; its last `held` bytes stay behind until `finish`. */
  function begin(id: string, held = 0, hub = stage.hub) {
    const { sender } = stage;
    const body = sender.body(id);
    const upload = request(hub.url + sender.path(), {
      method: 'POST',
      agent,
      headers: {
        ...sender.headers(id),
        'Content-Length': body.byteLength,
        ...(held > 0 ? { Expect: '100-continue' } : {}),
      },
    });
    const answered = responseTo(upload).then(async (response) => {
      const text = (await response.toArray()).join('');
      sender.ledger.answer(response.statusCode!, text);
      return { status: response.statusCode, connection: response.headers.connection };
    });
    // Awaited later, or expected to fail.
    answered.catch(() => undefined);
    sender.ledger.send(id);
    upload.write(body.subarray(0, body.byteLength - held));
    const finish = () => upload.end(body.subarray(body.byteLength - held));
    if (held === 0) finish();
    return { upload, answered, finish };
  }

  async function leaveIdle(): Promise<void> {
    const response = await responseTo(get(`${stage.hub.url}/api/health/live`, { agent }));
    await response.toArray();
  }

  /** Asks for a large answer and reads its head alone. */
  async function beginLarge() {
    const { sender, hub } = stage;
    const padded = Buffer.concat([sender.body('large'), Buffer.alloc(LARGE, ' ')]);
    const { body } = await sender.send(hub.url, 'large', padded);
    const { id } = (body as { upload: { id: string } }).upload;
    const path = `${hub.url}${sender.path()}/${id}/raw`;
    const response = await responseTo(get(path, { agent, headers: sender.headers('large') }));
    return { response, whole: padded };
  }

  it.concurrent('answers what is under way, takes nothing new, and ends with 0 when the last is answered', async () => {
    const { hub, sender, database } = stage;
    await Promise.all([leaveIdle(), leaveIdle(), leaveIdle()]);
    const large = await beginLarge();
    const barrier = await closeBarrier(database.superuserUrl);
    const held = [1, 2, 3, 4].map((n) => begin(`held-${n}`));
    const halfSent = begin('half-sent', 10);
    await once(halfSent.upload, 'continue');
    await barrier.waiting(held.length);

    const draining = hub.said(/web draining/);
    hub.child.kill('SIGTERM');
    await draining;
    const [refusal] = await once(connect(Number(new URL(hub.url).port), '127.0.0.1'), 'error');
    expect(refusal).toMatchObject({ code: 'ECONNREFUSED' });
    await barrier.open();
    halfSent.finish();
    const answers = await Promise.all([...held, halfSent].map(({ answered }) => answered));
    expect(answers).toEqual(answers.map(() => ({ status: 201, connection: 'close' })));
    expect(large.whole.equals(Buffer.concat(await large.response.toArray()))).toBe(true);

    const answered = performance.now();
    expect(await hub.ended).toEqual({ code: 0, signal: null });
    expect(performance.now() - answered).toBeLessThan(AT_ONCE_MS);
    const standing = await reckon(sender.ledger, stage.projectId, stage.sql);
    expect(standing).toMatchObject({ acknowledged: 6, lost: [], broken: [], unacknowledged: 0, strays: 0 });
  });

  it.concurrent('ends with 0 within the drain limit though a client never finishes', async () => {
    const hub = await startHub(stage.database);
    const { upload, answered } = begin('never', 10, hub);
    await once(upload, 'continue');
    const asked = performance.now();
    expect(await hub.stop()).toEqual({ code: 0, signal: null });
    expect(performance.now() - asked).toBeLessThan(DRAIN_MS + AT_ONCE_MS);
    await expect(answered).rejects.toThrow();
  });
});
