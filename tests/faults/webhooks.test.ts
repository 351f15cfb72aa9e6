import { createServer, type ServerResponse } from 'node:http';
import type { AddressInfo } from 'node:net';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { closeDatabase } from '@/db/tenant';
import { type Api, api } from '@/tests/setup/api';
import { environmentOf, type Hub, type HubDatabase, newDatabase, startHub } from '@/tests/setup/hub';
import { type Program, startProgram } from '@/tests/setup/program';
import { callerRoles } from '@/tests/setup/roles';
import { openSql, type Sql } from './sql';
import { until } from './until';
import './patience';

const NEAR = { HUBTACK_WEBHOOK_HTTP: '1', HUBTACK_WEBHOOK_NETWORKS: '127.0.0.1/32' };
const WELL = { code: 0, signal: null };

describe('webhooks', () => {
  let database: HubDatabase;
  let hub: Hub;
  let caller: Api;
  let sql: Sql['run'];
  let close: Sql['close'];
  let at: string;
  /** Ids of messages as they came in, and answers that are held back. */
  const came: string[] = [];
  const held: ServerResponse[] = [];
  let holding = false;
  const receiver = createServer((request, response) => {
    came.push(request.headers['webhook-id'] as string);
    request.resume();
    if (holding) held.push(response);
    else response.writeHead(204).end();
  });

  const startWorker = async (): Promise<Program> => {
    const worker = startProgram('scripts/worker.ts', environmentOf(database, NEAR));
    await worker.said(/worker ready/);
    worker.listen(null);
    return worker;
  };
  const happen = async (name: string) => {
    await caller.post('/projects', { name, lengthUnit: 'm', frame: { kind: 'local' } }).expect(201);
  };
  const deliveries = async () => (await caller.get(`${at}/deliveries?limit=200`).expect(200)).body.data;
  const expireLeases = () =>
    sql(`update webhook_deliveries set next_attempt_at = next_attempt_at - interval '2 minutes'`);

  beforeAll(async () => {
    await new Promise<void>((resolve) => receiver.listen(0, '127.0.0.1', resolve));
    database = await newDatabase(inject('cluster'), 'fault_webhooks');
    const { key } = await callerRoles(database);
    await closeDatabase();
    hub = await startHub(database, { environment: NEAR });
    caller = api(hub.url, key);
    ({ run: sql, close } = await openSql(database.superuserUrl));
    const url = `http://127.0.0.1:${(receiver.address() as AddressInfo).port}/`;
    const { body } = await caller
      .post('/webhook-endpoints', { url, eventTypes: ['project.created'] })
      .expect(201);
    at = `/webhook-endpoints/${body.endpoint.id}`;
  });
  afterAll(async () => {
    await hub.stop();
    receiver.closeAllConnections();
    receiver.close();
    await close();
  });

  it('of events that happened while no worker ran are told by the first that does', async () => {
    for (const name of ['a', 'b', 'c']) await happen(name);
    const worker = await startWorker();
    await until('all are told', () => came.length >= 3);
    await until('all is written', async () =>
      (await deliveries()).every(({ status }: { status: string }) => status === 'delivered'),
    );
    expect(await worker.stop()).toEqual(WELL);
    expect(new Set(came).size).toBe(3);
    expect(came).toHaveLength(3);
  });

  it('under way in a worker that is killed are sent by the next, under the same id', async () => {
    came.length = 0;
    holding = true;
    const killed = await startWorker();
    await happen('d');
    await until('it is under way', () => came.length >= 1);
    // No transaction waits with the receiver.
    await until('no transaction is open', async () => {
      const open = await sql(
        `select from pg_stat_activity where datname = current_database() and usename = 'hubtack_app'
          and state <> 'idle'`,
      );
      return open.length === 0;
    });
    await killed.stop('SIGKILL');
    holding = false;
    const next = await startWorker();
    expect(came).toHaveLength(1);
    await expireLeases();
    await until('it is sent again', () => came.length >= 2);
    expect(came[1]).toBe(came[0]);
    await until('it is written', async () => (await deliveries())[0].status === 'delivered');
    expect((await deliveries())[0].attempts).toBe(2);
    expect(await next.stop()).toEqual(WELL);
  });

  it('under way in a worker that stops are given back at once', async () => {
    came.length = 0;
    holding = true;
    const stopped = await startWorker();
    await happen('e');
    await until('it is under way', () => came.length >= 1);
    expect(await stopped.stop()).toEqual(WELL);
    holding = false;
    expect((await deliveries())[0]).toMatchObject({ status: 'pending', attempts: 0 });
    const next = await startWorker();
    await until('it is sent again', () => came.length >= 2);
    expect(came[1]).toBe(came[0]);
    await until('it is written', async () => (await deliveries())[0].status === 'delivered');
    expect(await next.stop()).toEqual(WELL);
  });

  it('of many events under kills of two workers: each is told at least once, none is forgotten', async () => {
    came.length = 0;
    const before = (await deliveries()).length;
    let workers = await Promise.all([startWorker(), startWorker()]);
    for (let i = 0; i < 40; i++) {
      await happen(`many ${i}`);
      if (i % 10 === 9) {
        const [first, second] = workers;
        await first.stop('SIGKILL');
        workers = [second, await startWorker()];
      }
    }
    await until(
      'all are delivered',
      async () => {
        await expireLeases();
        const all = await deliveries();
        const done = all.filter(({ status }: { status: string }) => status === 'delivered');
        return done.length === before + 40 ? true : null;
      },
      60,
    );
    expect(new Set(came).size).toBe(40);
    await Promise.all(workers.map((worker) => worker.stop()));
  });

  it('and streams end with the web process, which does not wait for them', async () => {
    const stop = new AbortController();
    const { key } = await callerRoles(database);
    await closeDatabase();
    const response = await fetch(`${hub.url}/api/v1/events/stream?after=latest`, {
      headers: { Authorization: `Bearer ${key}` },
      signal: stop.signal,
    });
    const reader = response.body!.getReader();
    await reader.read();
    const began = performance.now();
    const ending = hub.stop();
    for (let part = await reader.read(); !part.done; part = await reader.read());
    expect(await ending).toEqual(WELL);
    // Far from the 20 seconds that requests under way are given.
    expect(performance.now() - began).toBeLessThan(10_000);
  });
});
