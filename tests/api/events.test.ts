import { setTimeout as pause } from 'node:timers/promises';
import { beforeAll, describe, expect, it } from 'vitest';
import { withClient } from './fixtures/database';
import { expectProblem } from './fixtures/problems';
import {
  document,
  newLayer,
  newSite,
  newSiteOrganization,
  resection,
  type SiteOrganization,
} from './fixtures/site';

interface Event {
  id: string;
  type: string;
  subject: string;
  projectId: string | null;
}

describe('events', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });

  const query = (parameters: Record<string, string | number>) => {
    const text = new URLSearchParams(Object.entries(parameters).map(([k, v]) => [k, String(v)]));
    return site.admin.get(`/events?${text}`);
  };
  const page = async (parameters: Record<string, string | number> = {}) => {
    const { body } = await query(parameters).expect(200);
    return body as { data: Event[]; nextCursor: string };
  };
  /** Everything that is told by now after a cursor, page by page. */
  const told = async (after?: string, limit = 50, further: Record<string, string> = {}) => {
    const found: Event[] = [];
    let cursor = after;
    for (;;) {
      const { data, nextCursor } = await page({ ...further, limit, ...(cursor ? { after: cursor } : {}) });
      if (data.length === 0) return { found, cursor: nextCursor };
      found.push(...data);
      cursor = nextCursor;
    }
  };
  /** Waits until what was written so far is told: until then a transaction of any suite on this server is older. */
  const settled = () =>
    withClient(site.hub.superuserUrl, async (client) => {
      const written = await client.query('select pg_current_xact_id()::text as xid');
      const passed = 'select pg_snapshot_xmin(pg_current_snapshot()) > $1::xid8 as passed';
      while (!(await client.query(passed, [written.rows[0].xid])).rows[0].passed) await pause(5);
    });
  /** Everything that was written so far after a cursor. */
  const follow = async (...asked: Parameters<typeof told>) => {
    await settled();
    return told(...asked);
  };
  const types = (events: Event[]) => events.map(({ type }) => type);

  it('tell what happened, each once, in order', async () => {
    const { cursor } = await follow();
    await newLayer(site.admin, site.at);
    const { body } = await site.upload(document('e', { setups: [resection('e')] })).expect(201);
    const [{ id }] = body.setups;
    const order = { machine: 'DZ-3', layer: 'subgrade', offset: -0.5 };
    await site.admin.post(site.at(`/setups/${id}/release`), order).expect(200);
    const withdrawn = await site.admin.post(site.at(`/setups/${id}/withdraw`), {}).expect(200);
    const acknowledgement = withdrawn.body.acknowledgements[0].id;
    await site.admin.post(site.at(`/acknowledgements/${acknowledgement}/acknowledge`), {}).expect(200);
    await site.upload(document('e', { setups: [resection('e-2')] })).expect(409);
    await site.admin.patch(site.at('/control-points/HT-5'), { status: 'suspect', note: 'Odd.' }).expect(200);

    const { found } = await follow(cursor);
    expect(found.map(({ type, subject }) => [type, subject])).toEqual([
      ['surface.created', expect.any(String)],
      ['layer.created', 'subgrade'],
      ['upload.processed', body.upload.id],
      ['setup.computed', id],
      ['setup.released', id],
      ['setup.withdrawn', id],
      ['withdrawal.acknowledged', acknowledgement],
      ['upload.refused', expect.any(String)],
      ['control.suspect', 'HT-5'],
    ]);
    for (const event of found) expect(event.projectId).toBe(site.projectId);
  });

  it('come in pages of any size, nothing twice and nothing skipped', async () => {
    const all = (await follow()).found;
    for (const limit of [1, 2, 7]) {
      const { found } = await follow(undefined, limit);
      expect(found.map(({ id }) => id)).toEqual(all.map(({ id }) => id));
    }
  });

  it('answer a cursor at the end too, from which later ones follow', async () => {
    const { cursor } = await follow();
    expect(await page({ after: cursor })).toEqual({ data: [], nextCursor: cursor });
    await newSite(site.admin, 'After the end');
    const { found } = await follow(cursor);
    expect(types(found)).toEqual(['project.created', 'control.imported', 'instrument.registered']);
  });

  it('are told by type and by project', async () => {
    const other = await newSite(site.admin, 'By project');
    const { found } = await follow(undefined, 50, { projectId: other.projectId });
    expect(types(found)).toEqual(['project.created', 'control.imported', 'instrument.registered']);
    const released = await follow(undefined, 50, { type: 'setup.released' });
    expect(types(released.found)).toEqual(['setup.released']);
  });

  it('bind a cursor to its filters, and take no other text for one', async () => {
    const { nextCursor } = await page({ type: 'setup.released' });
    expectProblem(await query({ after: nextCursor }), 'cursor_invalid');
    const forge = (...parts: unknown[]) => Buffer.from(JSON.stringify(parts)).toString('base64url');
    for (const after of [
      'abc',
      forge('x/y', 'events', 1, null, null),
      forge('1', 'events', 1, null, null),
      forge('99999999999999999999999/1', 'events', 1, null, null),
      forge(null, 'events', 1, null, null),
    ])
      expectProblem(await query({ after }), 'cursor_invalid');
  });

  it('are only those of the projects that a key is bound to', async () => {
    const other = await newSite(site.admin, 'Bound');
    const bound = site.as(await site.newKey(['events:read'], [other.projectId]));
    await settled();
    const { body } = await bound.get('/events?limit=200').expect(200);
    expect(new Set(body.data.map((e: Event) => e.projectId))).toEqual(new Set([other.projectId]));
    expectProblem(await bound.get(`/events?projectId=${site.projectId}`), 'not_found');
  });

  it('never skip a transaction that commits late', async () => {
    const { cursor } = await follow();
    const insert = (name: string) => ({
      text: `insert into events (organization_id, id, type, subject, data, occurred_at)
        values ($1, gen_random_uuid(), 'test.written', $2, '{}', now())`,
      values: [site.organizationId, name],
    });
    const tenant = {
      text: "select set_config('app.organization_id', $1, true)",
      values: [site.organizationId],
    };
    await withClient(site.hub.appUrl, (early) =>
      withClient(site.hub.appUrl, async (late) => {
        // Both take their places; the one that came first commits last.
        for (const [client, name] of [
          [early, 'first'],
          [late, 'second'],
        ] as const) {
          await client.query('begin');
          await client.query(tenant);
          await client.query(insert(name));
        }
        await late.query('commit');
        // While the first is still open the second is not told yet: a cursor behind it would skip the first.
        const during = await told(cursor);
        expect(during.found).toEqual([]);
        await early.query(insert('third'));
        await early.query('commit');
        const { found } = await follow(during.cursor);
        expect(found.map(({ subject }) => subject)).toEqual(['first', 'third', 'second']);
        expect((await follow(cursor)).found).toEqual(found);
      }),
    );
  });

  it('stand in the audit trail too, with who and by which request', async () => {
    const answer = await site.as(site.people.surveyor.key).patch(site.at('/control-points/HT-5'), {
      status: 'trusted',
      note: 'Checked from BM-1.',
    });
    const { body } = await site.admin.get('/audit-entries?action=control.trusted').expect(200);
    expect(body.data[0]).toMatchObject({
      action: 'control.trusted',
      subject: 'HT-5',
      projectId: site.projectId,
      requestId: answer.headers['request-id'],
      actor: { kind: 'key', name: 'site script' },
      details: { from: 'suspect', to: 'trusted', note: 'Checked from BM-1.' },
    });
    const bound = site.as(await site.newKey(['audit:read'], [site.projectId]));
    const { body: own } = await bound.get('/audit-entries?limit=200').expect(200);
    expect(new Set(own.data.map((e: Event) => e.projectId))).toEqual(new Set([site.projectId]));
  });

  it('leave no trace of what was refused as a whole', async () => {
    const { cursor } = await follow();
    const before = (await site.admin.get('/audit-entries')).body.data[0].id;
    await site.admin.post(site.at('/layers'), {}).expect(422);
    await site.admin
      .post('/projects', { name: 'Wren Fork', lengthUnit: 'ft', frame: { kind: 'local' } })
      .expect(409);
    expect((await follow(cursor)).found).toEqual([]);
    expect((await site.admin.get('/audit-entries')).body.data[0].id).toBe(before);
  });
});
