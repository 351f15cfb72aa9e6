import { randomUUID } from 'node:crypto';
import { Webhook } from 'standardwebhooks';
import { beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { systemRuntime } from '@/lib/runtime';
import { claim } from '@/lib/services/webhookDeliveries/claim';
import { fanOut } from '@/lib/services/webhookDeliveries/fanOut';
import { settle } from '@/lib/services/webhookDeliveries/settle';
import { SCOPE_NAMES } from '@/openapi/scopes';
import { api } from '@/tests/setup/api';
import { testCourier } from './fixtures/courier';
import { withClient } from './fixtures/database';
import { expectProblem } from './fixtures/problems';
import { newSite, newSiteOrganization, type SiteOrganization } from './fixtures/site';

const DAY = 86_400;

describe('webhooks', () => {
  let site: SiteOrganization;
  let host: string;
  let hand: ReturnType<typeof testCourier>;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });
  beforeEach(async () => {
    // Each test has a receiver of its own, and endpoints of the others are off.
    const { body } = await site.admin.get('/webhook-endpoints?limit=200').expect(200);
    for (const { id } of body.data) await site.admin.delete(`/webhook-endpoints/${id}`).expect(204);
    host = `r-${randomUUID()}.example`;
    hand = testCourier(host);
  });

  const make = async (body: object = {}) => {
    const sent = { url: `https://${host}/in`, eventTypes: ['instrument.*'], ...body };
    const { body: made } = await site.admin.post('/webhook-endpoints', sent).expect(201);
    const at = `/webhook-endpoints/${made.endpoint.id}`;
    return {
      id: made.endpoint.id as string,
      secret: made.secret as string,
      at,
      read: async () => (await site.admin.get(at).expect(200)).body,
      deliveries: async (query = '') =>
        (await site.admin.get(`${at}/deliveries?limit=200${query}`).expect(200)).body.data,
    };
  };
  let serial = 0;
  /** Something happens: an instrument is registered. */
  const happen = async (at = site.at) => {
    const name = `I-${serial++}`;
    await site.admin.post(at('/instruments'), { name, kind: 'level' }).expect(201);
    hand.catchUp();
    return name;
  };
  const formerSecret = async (id: string) => {
    const { rows } = await withClient(site.hub.superuserUrl, (client) =>
      client.query('select previous_secret_sealed as sealed from webhook_endpoints where id = $1', [id]),
    );
    return rows[0].sealed;
  };
  const subjects = () => hand.got.map(({ subject }) => subject);

  describe('an endpoint', () => {
    it('shows its secret once', async () => {
      const { secret, read, at } = await make();
      expect(secret).toMatch(/^whsec_[A-Za-z0-9+/]{43}=$/);
      const { body } = await site.admin.get('/webhook-endpoints').expect(200);
      const { body: audit } = await site.admin.get('/audit-entries?limit=200').expect(200);
      expect(JSON.stringify([await read(), body, audit])).not.toContain(secret);
      expect(await read()).toMatchObject({ status: 'active', reason: null, lastDeliveredAt: null });
      const kept = await withClient(site.hub.superuserUrl, (client) =>
        client.query('select * from webhook_endpoints where id = $1', [at.split('/').at(-1)]),
      );
      const rows = kept.rows.map((row) => Object.values(row).map(String).join(' ')).join(' ');
      expect(rows).not.toContain(secret.slice(6));
    });

    it.each([
      [{ url: `http://receiver.example/` }, '/url webhook_url_refused'],
      [{ url: 'https://127.0.0.1/' }, '/url webhook_url_refused'],
      [{ url: 'https://2130706433/' }, '/url webhook_url_refused'],
      [{ url: 'https://[::ffff:10.0.0.1]/' }, '/url webhook_url_refused'],
      [{ url: 'https://169.254.169.254/latest' }, '/url webhook_url_refused'],
      [{ url: 'https://a:b@receiver.example/' }, '/url webhook_url_refused'],
      [{ url: 'receiver.example' }, '/url webhook_url_refused'],
      [{ url: 'javascript:alert(1)' }, '/url webhook_url_refused'],
      [{ url: `https://receiver.example/${'x'.repeat(2000)}` }, '/url invalid_value'],
      [{ eventTypes: [] }, '/eventTypes invalid_value'],
      [{ eventTypes: ['setup'] }, '/eventTypes/0 invalid_value'],
      [{ projectIds: ['0198f2b4-6c1e-7a35-9c0d-2b7f5d1e8a44'] }, '/projectIds/0 project_unknown'],
      [{ secret: 'whsec_mine' }, '/secret unknown_field'],
    ])('is refused with %j', async (body, place) => {
      const sent = { url: 'https://receiver.example/', ...body };
      expectProblem(await site.admin.post('/webhook-endpoints', sent), 'invalid', [place]);
      const { at } = await make();
      const { secret: _, ...patch } = sent as { secret?: string };
      if (place !== '/secret unknown_field')
        expectProblem(await site.admin.patch(at, patch), 'invalid', [place]);
    });

    it('is made by nobody who may not follow events', async () => {
      const key = await site.newKey(SCOPE_NAMES.filter((scope) => scope !== 'events:read'));
      const caller = api(site.hub.url, key);
      const body = { url: 'https://receiver.example/' };
      expectProblem(await caller.post('/webhook-endpoints', body), 'forbidden');
      const { at } = await make();
      expectProblem(await caller.patch(at, { url: 'https://elsewhere.example/' }), 'forbidden');
      // To stop a leak is for everybody who may change it.
      await caller.patch(at, { enabled: false }).expect(200);
      expectProblem(await caller.patch(at, { enabled: true }), 'forbidden');
    });

    it('is refused beyond fifty, also where several are made at once', async () => {
      for (let i = 0; i < 47; i++) await make();
      const body = { url: `https://${host}/` };
      const atOnce = await Promise.all(
        Array.from({ length: 8 }, () => site.admin.post('/webhook-endpoints', body)),
      );
      expect(atOnce.map(({ status }) => status).sort()).toEqual([201, 201, 201, 409, 409, 409, 409, 409]);
      expectProblem(await site.admin.post('/webhook-endpoints', { url: `https://${host}/` }), 'conflict');
    });
  });

  describe('messages', () => {
    it('tell what happens from then on, each once, to whoever wants it', async () => {
      await happen();
      const other = await newSite(site.admin, 'Other hooks');
      const all = await make({ url: `https://${host}/all`, eventTypes: null });
      await make({ url: `https://${host}/kind`, eventTypes: ['instrument.*'] });
      await make({ url: `https://${host}/type`, eventTypes: ['instrument.registered'] });
      await make({ url: `https://${host}/none`, eventTypes: ['setup.released'] });
      await make({ url: `https://${host}/other`, projectIds: [other.projectId] });
      await make({ url: `https://${host}/off`, enabled: false });
      const here = await happen();
      const there = await happen(other.at);
      await hand.until(6 + 7);
      await hand.round();
      const of = (path: string) =>
        hand.got.filter(({ url }) => url.endsWith(path)).map(({ subject }) => subject);
      expect(of('/kind').sort()).toEqual([here, there].sort());
      expect(of('/type').sort()).toEqual([here, there].sort());
      expect(of('/other')).toEqual([there]);
      expect([of('/none'), of('/off')]).toEqual([[], []]);
      // Its own making and that of the others, too.
      expect(of('/all')).toHaveLength(8);
      expect(new Set(hand.got.map(({ url, headers }) => `${url} ${headers['webhook-id']}`)).size).toBe(13);
      expect(await all.deliveries()).toHaveLength(8);
    });

    it('are the event as the feed shows it, signed', async () => {
      const { secret } = await make();
      const name = await happen();
      await hand.until(1);
      const [{ headers, body }] = hand.got;
      const message = new Webhook(secret).verify(body, headers) as { data: { id: string } };
      const { body: feed } = await site.admin.get('/events?type=instrument.registered&limit=200').expect(200);
      const event = feed.data.find(({ subject }: { subject: string }) => subject === name);
      expect(message).toEqual({ type: event.type, timestamp: event.occurredAt, data: event });
      expect(headers['webhook-id']).toBe(event.id);
      expect(headers['content-type']).toBe('application/json');
    });

    it('carry both signatures while secrets overlap, and then the new one alone', async () => {
      const { at, id, secret: old } = await make();
      const { body } = await site.admin.post(`${at}/rotate`, { overlapMinutes: 60 }).expect(201);
      expect(await formerSecret(id)).not.toBeNull();
      expect(body.endpoint.secret.previousEndsAt).not.toBeNull();
      const verifies = (secret: string, message: (typeof hand.got)[number]) => {
        // The package has a clock of its own.
        const headers = message.headers;
        const signed = new Webhook(secret).sign(
          headers['webhook-id'],
          new Date(Number(headers['webhook-timestamp']) * 1000),
          message.body,
        );
        return headers['webhook-signature'].split(' ').includes(signed);
      };
      await happen();
      await hand.until(1);
      hand.pass(3601);
      await happen();
      await hand.until(2);
      expect(hand.got.map((m) => [verifies(old, m), verifies(body.secret, m)])).toEqual([
        [true, true],
        [false, true],
      ]);
      // What signs no longer is not kept.
      expect(await formerSecret(id)).toBeNull();
      const { body: again } = await site.admin.post(`${at}/rotate`, { overlapMinutes: 0 }).expect(201);
      await happen();
      await hand.until(3);
      expect([verifies(body.secret, hand.got[2]), verifies(again.secret, hand.got[2])]).toEqual([
        false,
        true,
      ]);
    });

    it('skip no event that commits late, and tell none twice', async () => {
      await make({ eventTypes: ['late.*', 'instrument.*'] });
      const before = await happen();
      await hand.until(1);
      await withClient(site.hub.superuserUrl, async (client) => {
        await client.query('begin');
        await client.query(
          `insert into events (organization_id, id, type, subject, data, occurred_at)
            values ($1, $2, 'late.happened', 'late', '{}', now())`,
          [site.organizationId, randomUUID()],
        );
        const after = await happen();
        await hand.round();
        // What came later waits for it.
        expect(subjects()).toEqual([before]);
        await client.query('commit');
        await hand.until(3);
        await hand.round();
        expect(subjects().slice(1).sort()).toEqual([after, 'late'].sort());
      });
    });

    it('come where another organization’s cannot be made', async () => {
      const other = await newSiteOrganization();
      await other.admin.post('/webhook-endpoints', { url: `https://${host}/other` }).expect(201);
      await make();
      await withClient(site.hub.superuserUrl, async (client) => {
        await client.query(`
          create function refuse() returns trigger language plpgsql as $$ begin raise 'refused'; end $$;
          create trigger refuse before update on webhook_endpoints for each row
            when (new.organization_id = '${other.organizationId}') execute function refuse()`);
        try {
          await other.admin.post(other.at('/instruments'), { name: 'L', kind: 'level' }).expect(201);
          const name = await happen();
          // Another organization is first each time: in one of these rounds it is the one that fails.
          await hand.until(1);
          for (let i = 0; i < 10; i++) await hand.round();
          expect(subjects()).toEqual([name]);
          expect(await hand.courier.round()).toBe(false);
        } finally {
          await client.query('drop trigger refuse on webhook_endpoints; drop function refuse()');
        }
      });
      // Nothing of it is lost.
      await hand.until(2);
      expect(await hand.courier.round()).toBe(true);
      const { body } = await other.admin.get('/webhook-endpoints').expect(200);
      for (const { id } of body.data) await other.admin.delete(`/webhook-endpoints/${id}`).expect(204);
    });

    it('of many, some at a time: a receiver that hangs leaves the others their places', async () => {
      await make({ url: `https://${host}/slow` });
      await make({ url: `https://${host}/fast` });
      let letGo = () => {};
      const held = new Promise<void>((resolve) => {
        letGo = resolve;
      });
      let waiting = 0;
      let most = 0;
      hand.answerWith(async ({ url }) => {
        if (url.endsWith('/fast')) return { status: 200 };
        most = Math.max(most, ++waiting);
        await held;
        waiting--;
        return { status: 200 };
      });
      for (let i = 0; i < 10; i++) await happen();
      const fast = () => hand.got.filter(({ url }) => url.endsWith('/fast')).length;
      while (fast() < 10) {
        await hand.courier.round();
        await new Promise((resolve) => setTimeout(resolve, 20));
      }
      expect(most).toBe(4);
      letGo();
      await hand.until(20);
      expect(most).toBe(4);
    });
  });

  describe('a message that does not get through', () => {
    it('is tried again on the published schedule, then given up, and the endpoint with it', async () => {
      const { read, deliveries, id } = await make();
      hand.answerWith(() => ({ status: 500, body: 'out of order' }));
      await happen();
      const times: number[] = [];
      await hand.until(1);
      times.push(hand.now().getTime());
      expect(await read()).toMatchObject({ status: 'failing', reason: { code: 'failing' } });
      // One that comes later is still pending when the first is given up.
      const pauses = [5, 300, 1800, 7200, 18_000, 36_000, 50_400, 72_000, 86_400];
      for (const seconds of pauses) {
        hand.pass(seconds - 1);
        await hand.round();
        expect(hand.got).toHaveLength(times.length);
        hand.pass(seconds * 0.1 + 1);
        if (times.length === 9) {
          const [{ status, nextAttemptAt }] = await deliveries();
          expect([status, new Date(nextAttemptAt) <= hand.now()]).toEqual(['pending', true]);
        }
        await hand.until(times.length + 1);
        times.push(hand.now().getTime());
      }
      expect(new Set(hand.got.map(({ headers }) => headers['webhook-id'])).size).toBe(1);
      const [delivery] = await deliveries();
      expect(delivery).toMatchObject({
        status: 'failed',
        attempts: 10,
        nextAttemptAt: null,
        reason: { code: 'attempts_exhausted' },
        lastAttempt: { number: 10, answer: { status: 500, body: 'out of order' } },
      });
      expect(await read()).toMatchObject({ status: 'disabled', enabled: false, reason: { code: 'failing' } });
      const { body: feed } = await site.admin
        .get('/events?type=webhookEndpoint.disabled&limit=200')
        .expect(200);
      const told = feed.data.filter(({ subject }: { subject: string }) => subject === id);
      expect(told.map(({ data }: { data: object }) => data)).toEqual([{ reason: 'failing', host }]);
      hand.pass(2 * DAY);
      await happen();
      await hand.round();
      expect(hand.got).toHaveLength(10);
    });

    it('alone does not end an endpoint that gets others', async () => {
      const { read, deliveries } = await make();
      const bad = await happen();
      hand.answerWith(({ subject }) => ({ status: subject === bad ? 500 : 200 }));
      for (let i = 1; i <= 10; i++) {
        await hand.until(i);
        hand.pass(1.1 * DAY);
      }
      // Failing as it was, another one got through.
      expect(await read()).toMatchObject({ status: 'disabled' });
      const second = await make({ url: `https://${host}/second` });
      const worse = await happen();
      hand.answerWith(({ subject }) => ({ status: subject === worse ? 500 : 200 }));
      await hand.until(11);
      await happen();
      await hand.until(12);
      expect((await second.read()).status).toBe('active');
      for (let i = 13; i <= 21; i++) {
        hand.pass(1.1 * DAY);
        await hand.until(i);
      }
      expect(await second.read()).toMatchObject({ status: 'failing', enabled: true });
      expect((await second.deliveries('&status=failed')).length).toBe(1);
      expect(await deliveries('&status=delivered')).toEqual([]);
    });

    it('gets through at last, and the endpoint is well again', async () => {
      const { read, deliveries, at } = await make();
      hand.answerWith(() => ({ failure: 'timed_out' }));
      await happen();
      await hand.until(1);
      hand.answerWith(() => ({ status: 302, headers: { location: 'https://elsewhere.example/' } }));
      hand.pass(6);
      await hand.until(2);
      hand.answerWith(() => ({ status: 204 }));
      hand.pass(331);
      await hand.until(3);
      expect(await read()).toMatchObject({ status: 'active', failingSince: null });
      const [{ id }] = await deliveries();
      const { body } = await site.admin.get(`${at}/deliveries/${id}`).expect(200);
      expect(body).toMatchObject({
        status: 'delivered',
        attempts: 3,
        message: { type: 'instrument.registered' },
      });
      expect(body.history).toMatchObject([
        { number: 1, answer: null, failure: { code: 'timed_out' } },
        { number: 2, answer: { status: 302 }, failure: { code: 'status_refused' } },
        { number: 3, answer: { status: 204 }, failure: null, request: { address: '198.51.100.7' } },
      ]);
      expect(body.history[1].failure.text).toContain('redirects are not followed');
      expect(body.history[0].request.headers).toHaveProperty('webhook-id');
      expect(JSON.stringify(body)).not.toContain(hand.got[0].headers['webhook-signature'].slice(3));
    });

    it('waits as long as a busy receiver asks', async () => {
      await make();
      hand.answerWith(() => ({ status: 429, headers: { 'retry-after': '120' } }));
      await happen();
      await hand.until(1);
      hand.pass(100);
      await hand.round();
      expect(hand.got).toHaveLength(1);
      hand.pass(21);
      await hand.until(2);
    });

    it('ends the endpoint at once where the receiver is gone', async () => {
      const { read, deliveries } = await make();
      hand.answerWith(() => ({ status: 410 }));
      for (let i = 0; i < 6; i++) await happen();
      await hand.until(1);
      await hand.round();
      expect(await read()).toMatchObject({ status: 'disabled', reason: { code: 'gone' } });
      const reasons = (await deliveries()).map(({ reason }: { reason: { code: string } }) => reason.code);
      expect(reasons).toHaveLength(6);
      expect(new Set(reasons)).toEqual(new Set(['endpoint_gone', 'endpoint_disabled']));
    });

    it('is left by a worker that died, and taken again when its time is over', async () => {
      const { id, deliveries } = await make();
      await happen();
      let taken: Awaited<ReturnType<typeof claim>> = [];
      const room = { places: 4, eachEndpoint: 4, busy: new Map() };
      const lost = { ...systemRuntime, now: hand.now };
      while (taken.length === 0) {
        await fanOut(site.organizationId, lost);
        taken = await claim(site.organizationId, lost, room);
      }
      expect(taken.map(({ endpoint }) => endpoint.id)).toEqual([id]);
      hand.pass(59);
      await hand.round();
      expect(hand.got).toEqual([]);
      hand.pass(2);
      await hand.until(1);
      expect(hand.got[0].headers['webhook-id']).toBe(taken[0].delivery.eventId);
      // The first one comes back after all, with bad news: what was delivered stays delivered.
      const posted = { milliseconds: 1, address: null, answer: null, failure: 'timed_out' };
      await settle(taken[0], { startedAt: hand.now(), headers: {}, posted }, lost);
      expect(await deliveries()).toMatchObject([{ status: 'delivered', nextAttemptAt: null }]);
    });
  });

  describe('what is asked for', () => {
    it('a test is sent once, also where the endpoint is off', async () => {
      const { at, deliveries, read } = await make({ enabled: false });
      const { body } = await site.admin.post(`${at}/test`).expect(202);
      expect(body).toMatchObject({ kind: 'test', status: 'pending', eventType: 'webhook.test', attempts: 0 });
      hand.catchUp();
      hand.answerWith(() => ({ status: 500 }));
      await hand.until(1);
      hand.pass(DAY);
      await hand.round();
      expect(hand.got.map(({ type }) => type)).toEqual(['webhook.test']);
      expect(await deliveries()).toMatchObject([{ id: body.id, status: 'failed', attempts: 1 }]);
      expect((await read()).reason.code).toBe('by_request');
      expectProblem(await site.admin.post(`${at}/deliveries/${body.id}/replay`), 'conflict');
    });

    it('a test that gets through leaves an endpoint failing', async () => {
      const { at, read } = await make();
      hand.answerWith(({ type }) => ({ status: type === 'webhook.test' ? 200 : 500 }));
      await happen();
      await hand.until(1);
      const { failingSince } = await read();
      await site.admin.post(`${at}/test`).expect(202);
      hand.catchUp();
      while (!hand.got.some(({ type }) => type === 'webhook.test')) await hand.until(hand.got.length + 1);
      expect(failingSince).not.toBeNull();
      expect(await read()).toMatchObject({ status: 'failing', failingSince, lastDeliveredAt: null });
    });

    it('a message is replayed under its own id, as a delivery of its own', async () => {
      const { at, deliveries } = await make();
      await happen();
      await hand.until(1);
      const [first] = await deliveries();
      const { body } = await site.admin.post(`${at}/deliveries/${first.id}/replay`).expect(202);
      expect(body).toMatchObject({ kind: 'replay', status: 'pending', messageId: first.messageId });
      hand.catchUp();
      await hand.until(2);
      expect(hand.got[1].headers['webhook-id']).toBe(hand.got[0].headers['webhook-id']);
      expect(hand.got[1].body).toBe(hand.got[0].body);
      expect((await deliveries()).map(({ status }: { status: string }) => status)).toEqual([
        'delivered',
        'delivered',
      ]);
    });

    it('a time range is replayed, with what happened while the endpoint was off', async () => {
      const { at, read } = await make();
      const before = await happen();
      await hand.until(1);
      await site.admin.patch(at, { enabled: false }).expect(200);
      expect((await read()).reason.code).toBe('by_request');
      const since = new Date().toISOString();
      const missed = [await happen(), await happen()];
      await hand.round();
      expectProblem(await site.admin.post(`${at}/replays`, { since }), 'conflict');
      const until = new Date().toISOString();
      await site.admin.patch(at, { enabled: true }).expect(200);
      const after = await happen();
      await hand.until(2);
      expect(subjects()).toEqual([before, after]);
      const { body } = await site.admin.post(`${at}/replays`, { since, until }).expect(202);
      expect(body.count).toBe(2);
      hand.catchUp();
      await hand.until(4);
      expect(subjects().slice(2).sort()).toEqual(missed.sort());
      expectProblem(await site.admin.post(`${at}/replays`, { since: until, until: since }), 'invalid', [
        '/until time_out_of_order',
      ]);
    });

    it('a time range with too much in it is refused, and told what there is too much of', async () => {
      const other = await newSiteOrganization();
      const from = '2001-01-01T00:00:00Z';
      await withClient(site.hub.superuserUrl, (client) =>
        client.query(
          `insert into events (organization_id, id, type, subject, data, occurred_at)
            select $1, (lpad(to_hex((extract(epoch from at) * 1000)::bigint), 12, '0') || '70008000' ||
                lpad(to_hex(n), 12, '0'))::uuid, 'old.happened', 'old', '{}', at
              from generate_series(0, 100000) n, lateral (select $2::timestamptz + n * interval '1 second' as at) t`,
          [other.organizationId, from],
        ),
      );
      const replay = async (eventTypes: string[], seconds: number) => {
        const sent = { url: `https://${host}/`, eventTypes };
        const { body } = await other.admin.post('/webhook-endpoints', sent).expect(201);
        const at = `/webhook-endpoints/${body.endpoint.id}`;
        const until = new Date(Date.parse(from) + seconds * 1000).toISOString();
        const answer = await other.admin.post(`${at}/replays`, { since: from, until });
        await other.admin.delete(at).expect(204);
        return answer;
      };
      expect((await replay(['setup.*'], 100_000)).body.count).toBe(0);
      const many = await replay(['setup.*'], 100_001);
      expectProblem(many, 'conflict');
      expect(many.body.detail).toContain('100000 events of any kind');
      const wanted = await replay(['old.*'], 10_001);
      expectProblem(wanted, 'conflict');
      expect(wanted.body.detail).toContain('10000 messages');
    });

    it('a list of deliveries comes by page, status and type', async () => {
      const { at, deliveries } = await make({ eventTypes: null });
      for (let i = 0; i < 3; i++) await happen();
      await hand.until(4);
      const seen: string[] = [];
      let cursor: string | null = '';
      while (cursor !== null) {
        const more: string = cursor && `&cursor=${cursor}`;
        const { body } = await site.admin.get(`${at}/deliveries?limit=1${more}`).expect(200);
        seen.push(...body.data.map(({ id }: { id: string }) => id));
        cursor = body.nextCursor;
      }
      expect(seen).toEqual((await deliveries()).map(({ id }: { id: string }) => id));
      expect(await deliveries('&status=pending')).toEqual([]);
      expect(await deliveries('&type=instrument.registered')).toHaveLength(3);
      expectProblem(await site.admin.get(`${at}/deliveries?cursor=x`), 'cursor_invalid');
    });

    it('an endpoint that is deleted while a message is under way leaves nothing behind', async () => {
      const { at, id } = await make();
      hand.answerWith(async () => {
        await site.admin.delete(at).expect(204);
        return { status: 200 };
      });
      await happen();
      await hand.until(1);
      await hand.round();
      expectProblem(await site.admin.get(at), 'not_found');
      const left = await withClient(site.hub.superuserUrl, async (client) => {
        const of = async (text: string) => (await client.query(text, [id])).rowCount;
        return [
          await of('select from webhook_deliveries where endpoint_id = $1'),
          await of('select from directory where subject_id = $1'),
        ];
      });
      expect(left).toEqual([0, 0]);
    });
  });
});
