import { setTimeout as pause } from 'node:timers/promises';
import { beforeAll, describe, expect, it } from 'vitest';
import { eventStream } from '@/lib/http/eventStream';
import { Streams } from '@/lib/http/streams';
import { Problem } from '@/lib/problem';
import { api } from '@/tests/setup/api';
import { withClient } from './fixtures/database';
import { listen } from './fixtures/listen';
import { send } from './fixtures/send';
import { signIn } from './fixtures/session';
import { newSite, newSiteOrganization, type SiteOrganization } from './fixtures/site';

describe('the stream of events', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });

  const follow = (query = '', headers: Record<string, string> = {}, key = site.key) =>
    listen(`${site.hub.url}/api/v1/events/stream${query}`, { Authorization: `Bearer ${key}`, ...headers });
  let serial = 0;
  const happen = async (at = site.at) => {
    const name = `I-${serial++}`;
    await site.admin.post(at('/instruments'), { name, kind: 'level' }).expect(201);
    return name;
  };
  const subjects = ({ told }: Awaited<ReturnType<typeof follow>>) => told.map(({ data }) => data.subject);
  const feed = async () => {
    const { body } = await site.admin.get('/events?type=instrument.registered&limit=200').expect(200);
    return body.data as { id: string; subject: string }[];
  };

  it('tells from the beginning, then as it happens, what the feed tells', async () => {
    const stream = await follow('?type=instrument.registered');
    expect(stream.status).toBe(200);
    expect(stream.headers.get('content-type')).toBe('text/event-stream; charset=utf-8');
    expect(stream.headers.get('cache-control')).toBe('no-store, no-transform');
    const names = [await happen(), await happen()];
    await stream.until(3);
    expect(subjects(stream).slice(1)).toEqual(names);
    expect(stream.told.map(({ data }) => data)).toEqual(await feed());
    expect(stream.told.every(({ event }) => event === 'message')).toBe(true);
    expect(stream.retry()).toBeGreaterThan(0);
    // The id is a cursor of the feed, too.
    const { body } = await site.admin.get(`/events?type=instrument.registered&after=${stream.told[1].id}`);
    expect(body.data).toEqual([stream.told[2].data]);
    await stream.stop();
  });

  it('begins now where it is asked to, and says so by an id at once', async () => {
    await happen();
    const stream = await follow('?after=latest');
    while (stream.lastId() === '') await pause(10);
    const quiet = stream.lastId();
    const first = await happen();
    await stream.until(1);
    await stream.stop();
    expect(subjects(stream)).toEqual([first]);
    const again = await follow('?after=latest', { 'Last-Event-ID': quiet });
    await again.until(1);
    expect(subjects(again)).toEqual([first]);
    await again.stop();
  });

  it('misses nothing and tells nothing twice, however often it breaks off while much is written', async () => {
    const writers = 4;
    const each = 15;
    let stream = await follow('?after=latest&type=instrument.registered');
    while (stream.lastId() === '') await pause(5);
    const written: string[] = [];
    const writing = Promise.all(
      Array.from({ length: writers }, async () => {
        for (let i = 0; i < each; i++) written.push(await happen());
      }),
    );
    const got: string[] = [];
    for (let breaks = 0; got.length < writers * each; breaks++) {
      if (breaks > 200) throw new Error(`${got.length} came.`);
      await pause(70);
      await stream.stop();
      got.push(...(subjects(stream) as string[]));
      stream = await follow('?after=latest&type=instrument.registered', { 'Last-Event-ID': stream.lastId() });
    }
    await writing;
    await stream.stop();
    got.push(...(subjects(stream) as string[]));
    expect(got).toHaveLength(writers * each);
    expect([...got].sort()).toEqual([...written].sort());
    const order = (await feed()).map(({ subject }) => subject).filter((name) => written.includes(name));
    expect(got).toEqual(order);
  });

  it('waits for what commits late, and then tells it in its place', async () => {
    const stream = await follow('?after=latest');
    while (stream.lastId() === '') await pause(5);
    await withClient(site.hub.superuserUrl, async (client) => {
      await client.query('begin');
      await client.query(
        `insert into events (organization_id, id, type, subject, data, occurred_at)
          values ($1, gen_random_uuid(), 'late.happened', 'late', '{}', now())`,
        [site.organizationId],
      );
      const after = await happen();
      await pause(1200);
      expect(stream.told).toEqual([]);
      await client.query('commit');
      await stream.until(2);
      expect(subjects(stream)).toEqual(['late', after]);
    });
    await stream.stop();
  });

  it('tells a key that is bound to projects of these alone, and a session of all', async () => {
    const other = await newSite(site.admin, 'Another stream');
    const bound = await site.newKey(['events:read'], [other.projectId]);
    const session = await signIn(site.hub.url, site.people.analyst.email, site.people.analyst.password);
    const url = `${site.hub.url}/api/v1/events/stream?after=latest`;
    const streams = await Promise.all([
      follow('?after=latest', {}, bound),
      listen(url, { Cookie: session.cookie }),
    ]);
    while (streams.some((stream) => stream.lastId() === '')) await pause(5);
    const here = await happen();
    const there = await happen(other.at);
    await streams[0].until(1);
    await streams[1].until(2);
    expect(streams.map(subjects)).toEqual([[there], [here, there]]);
    for (const stream of streams) await stream.stop();
    const foreign = await follow(`?projectId=${site.projectId}`, {}, bound);
    expect(foreign.status).toBe(404);
  });

  it('refuses a cursor of another list as the feed does', async () => {
    const { body } = await site.admin.get('/events?type=setup.released').expect(200);
    for (const after of [body.nextCursor, 'x'])
      expect((await follow('', { 'Last-Event-ID': after })).status).toBe(400);
  });

  it('ends when its key is revoked, before anything more is told', async () => {
    const { body } = await site.admin
      .post('/api-keys', { name: 'listener', scopes: ['events:read'] })
      .expect(201);
    const stream = await follow('?after=latest', {}, body.secret);
    while (stream.lastId() === '') await pause(5);
    await site.admin.post(`/api-keys/${body.apiKey.id}/revoke`).expect(200);
    await stream.finished;
    expect(stream.told).toHaveLength(1);
    expect(stream.told[0]).toMatchObject({ event: 'problem', data: { code: 'key_revoked', status: 401 } });
  });

  it('is given five times to a key, and again when one is gone', async () => {
    const key = await site.newKey(['events:read']);
    const streams = [];
    for (let i = 0; i < 5; i++) streams.push(await follow('?after=latest', {}, key));
    const refused = await send(`${site.hub.url}/api/v1/events/stream`, {
      method: 'GET',
      headers: { Authorization: `Bearer ${key}` },
    });
    expect([refused.status, refused.body?.code]).toEqual([429, 'too_many_streams']);
    expect(Number(refused.headers['retry-after'])).toBeGreaterThan(0);
    // Others have their own.
    const other = await follow('?after=latest');
    expect(other.status).toBe(200);
    await other.stop();
    await streams[0].stop();
    let again = await follow('?after=latest', {}, key);
    for (let tries = 0; again.status === 429 && tries < 100; tries++) {
      await pause(50);
      again = await follow('?after=latest', {}, key);
    }
    expect(again.status).toBe(200);
    for (const stream of [...streams, again]) await stream.stop();
  });

  it('holds no connection to the database while it is quiet', async () => {
    const keys = await Promise.all(Array.from({ length: 4 }, () => site.newKey(['events:read'])));
    const streams = [];
    // More than the pool has.
    for (const key of keys) for (let i = 0; i < 5; i++) streams.push(await follow('?after=latest', {}, key));
    await pause(600);
    await Promise.all(
      Array.from({ length: 8 }, () => api(site.hub.url, site.key).get('/projects').expect(200)),
    );
    const name = await happen();
    await Promise.all(streams.map((stream) => stream.until(1)));
    expect(new Set(streams.flatMap(subjects))).toEqual(new Set([name]));
    for (const stream of streams) await stream.stop();
  });
});

describe('one stream by itself', () => {
  const caller = {
    kind: 'key',
    organizationId: 'o',
    personId: 'p',
    keyId: 'k',
    name: 'n',
    scopes: [],
    projectIds: null,
    expiresAt: null,
  } as const;
  const page = (...ids: number[]) => ({
    told: ids.map((id) => ({
      event: { id: String(id), type: 't.t', subject: 's', projectId: null, occurredAt: 'now', data: {} },
      cursor: String(id),
    })),
    cursor: String(ids.at(-1) ?? 0),
    reached: String(ids.at(-1) ?? 0),
  });
  const open = (read: (after: string) => Promise<ReturnType<typeof page>>, heartbeatMs = 30) => {
    const registry = new Streams();
    const body = eventStream(registry, {
      caller,
      read,
      first: page(),
      requestId: 'r',
      instance: '/',
      heartbeatMs,
    });
    const reader = body.getReader();
    const next = async () => {
      const { value } = await reader.read();
      return value && Buffer.from(value).toString();
    };
    return { registry, reader, next };
  };

  it('reads nothing on while its client takes nothing', async () => {
    let reads = 0;
    const { reader, next } = open(async (after) => {
      reads++;
      return page(Number(after) + 1);
    });
    await pause(200);
    const before = reads;
    expect(before).toBeLessThanOrEqual(3);
    const got = [];
    for (let i = 0; i < 10; i++) got.push(await next());
    expect(
      got
        .join('')
        .match(/^id: \d+$/gm)
        ?.slice(0, 4),
    ).toEqual(['id: 0', 'id: 1', 'id: 2', 'id: 3']);
    expect(reads).toBeLessThanOrEqual(before + 10);
    await reader.cancel();
    await pause(50);
    const left = reads;
    await pause(100);
    expect(reads).toBe(left);
  });

  it('passes a comment where nothing happens, and asks each time whether it may go on', async () => {
    let reads = 0;
    const { next } = open(async (after) => {
      if (++reads === 4) throw new Problem('key_revoked');
      return { ...page(), reached: `${after}+` };
    });
    expect(await next()).toContain('retry:');
    expect(await next()).toMatch(/^: still here\nid: 0\++\n\n$/);
    expect(reads).toBeGreaterThanOrEqual(1);
    let last = '';
    for (let part = await next(); part !== undefined; part = await next()) last = part;
    expect(last).toContain('event: problem');
    expect(last).toContain('key_revoked');
  });

  it('stays where the database is away, and goes on from there', async () => {
    let reads = 0;
    const { next, reader } = open(async (after) => {
      if (++reads < 3) throw new Problem('unavailable');
      return page(Number(after) + 1);
    });
    const got = [await next(), await next(), await next(), await next()].join('');
    expect(got).not.toContain('problem');
    expect(got).toContain('id: 1\n');
    await reader.cancel();
  });

  it('ends with the process, and no other begins', async () => {
    const { registry, next } = open(async () => page(), 10_000);
    await next();
    const waiting = next();
    registry.endAll();
    expect(await waiting).toBeUndefined();
    expect(() =>
      eventStream(registry, {
        caller,
        read: async () => page(),
        first: page(),
        requestId: 'r',
        instance: '/',
      }),
    ).toThrow(Problem);
  });
});
