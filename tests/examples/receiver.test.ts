import { spawn } from 'node:child_process';
import { createInterface } from 'node:readline';
import { afterAll, beforeAll, expect, inject, it } from 'vitest';
import { closeDatabase } from '@/db/tenant';
import { until } from '@/tests/faults/until';
import { type Api, api } from '@/tests/setup/api';
import { environmentOf, type Hub, newDatabase, startHub } from '@/tests/setup/hub';
import { type Program, startProgram } from '@/tests/setup/program';
import { callerRoles } from '@/tests/setup/roles';
import { EXAMPLES } from './walks';

/** A receiver on this machine stands for one on the internet. */
const NEAR = { HUBTACK_WEBHOOK_HTTP: '1', HUBTACK_WEBHOOK_NETWORKS: '127.0.0.1/32' };

let hub: Hub;
let worker: Program;
let caller: Api;
const stops: (() => void)[] = [];

beforeAll(async () => {
  const database = await newDatabase(inject('cluster'), 'example_receiver');
  const { key } = await callerRoles(database);
  await closeDatabase();
  hub = await startHub(database, { environment: NEAR });
  worker = startProgram('scripts/worker.ts', environmentOf(database, NEAR));
  await worker.said(/worker ready/);
  worker.listen(null);
  caller = api(hub.url, key);
}, 60_000);
afterAll(async () => {
  for (const stop of stops) stop();
  await Promise.all([worker.stop(), hub.stop()]);
});

/** The example, listening with a secret. */
async function startReceiver(secret: string, port = '0') {
  const child = spawn(process.execPath, [`${EXAMPLES}node/receiver.mjs`], {
    env: {
      PATH: process.env.PATH,
      NODE_ENV: process.env.NODE_ENV,
      HUBTACK_WEBHOOK_SECRET: secret,
      PORT: port,
    },
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  stops.push(() => child.kill());
  const lines: string[] = [];
  createInterface({ input: child.stdout }).on('line', (line) => lines.push(line));
  const [, own] = await until('it listens', () => /^listening on port (\d+)$/.exec(lines[0] ?? ''));
  return {
    port: own,
    lines,
    stop: () =>
      new Promise((resolve) => {
        child.once('close', resolve);
        child.kill();
      }),
  };
}

const happen = (name: string) =>
  caller.post('/projects', { name, lengthUnit: 'm', frame: { kind: 'local' } }).expect(201);
const delivered = (at: string) =>
  until('all is delivered', async () => {
    const { body } = await caller.get(`${at}/deliveries`).expect(200);
    return body.data.every(({ status }: { status: string }) => status === 'delivered') ? body.data : null;
  });

it('takes what really happens from a real worker, before and after its secret is rotated', async () => {
  // The port must be known before the secret is: it is taken once and used again.
  const { port, stop: leave } = await startReceiver('whsec_MfKQ9r8GKYqrTwjUPD8ILPZIo2LaLaSw');
  const url = `http://127.0.0.1:${port}/hooks`;
  const { body: made } = await caller
    .post('/webhook-endpoints', { url, eventTypes: ['project.created'] })
    .expect(201);
  const at = `/webhook-endpoints/${made.endpoint.id}`;
  await leave();

  let receiver = await startReceiver(made.secret, port);
  await caller.post(`${at}/test`).expect(202);
  await until('the test came', () => receiver.lines.some((line) => line.includes('webhook.test')));
  const { body: project } = await happen('Yard');
  await until('it came', () => receiver.lines.some((line) => line.endsWith(`project.created ${project.id}`)));

  // While both signatures are sent, the receiver changes over when it likes.
  const { body: rotated } = await caller.post(`${at}/rotate`, { overlapMinutes: 60 }).expect(201);
  const { body: second } = await happen('Second yard');
  await until('by the old secret', () => receiver.lines.some((line) => line.endsWith(second.id)));
  await receiver.stop();
  receiver = await startReceiver(rotated.secret, port);
  const { body: third } = await happen('Third yard');
  await until('by the new secret', () => receiver.lines.some((line) => line.endsWith(third.id)));

  // Sent again it is known again.
  const [last] = await delivered(at);
  await caller.post(`${at}/deliveries/${last.id}/replay`).expect(202);
  await until('it is known', () => receiver.lines.includes(`again: ${last.messageId}`));
  expect(receiver.lines.filter((line) => line.startsWith('refused'))).toEqual([]);
  await receiver.stop();
});

it('refuses what another secret signed, which is tried again and gets through once it is put right', async () => {
  const { port, stop } = await startReceiver('whsec_MfKQ9r8GKYqrTwjUPD8ILPZIo2LaLaSw');
  const url = `http://127.0.0.1:${port}/hooks`;
  const { body: made } = await caller
    .post('/webhook-endpoints', { url, eventTypes: ['project.created'] })
    .expect(201);
  const at = `/webhook-endpoints/${made.endpoint.id}`;
  const { body: project } = await happen('Refused yard');
  const refused = await until('it was refused', async () => {
    const { body } = await caller.get(`${at}/deliveries`).expect(200);
    return body.data[0]?.lastAttempt ? body.data[0] : null;
  });
  expect(refused).toMatchObject({ status: 'pending', lastAttempt: { answer: { status: 400 } } });
  expect((await caller.get(at)).body.status).toBe('failing');
  await stop();
  const receiver = await startReceiver(made.secret, port);
  // The second attempt comes after five seconds.
  await until('it got through', () => receiver.lines.some((line) => line.endsWith(project.id)));
  await delivered(at);
  expect((await caller.get(at)).body.status).toBe('active');
  await receiver.stop();
});
