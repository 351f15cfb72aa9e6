import { beforeAll, describe, expect, it } from 'vitest';
import { runJobOf } from '@/tests/setup/jobs';
import { withClient } from './fixtures/database';
import { expectProblem } from './fixtures/problems';
import { document, newSite, newSiteOrganization, resection, type SiteOrganization } from './fixtures/site';

const NETWORK = { setups: 'all', datum: { kind: 'weighted' } };

describe('a job', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
    await site.upload(document('jobs', { setups: [resection('s-1')] })).expect(201);
  });

  const start = (of = site) => of.admin.post(of.at('/adjustments'), NETWORK).expect(202);
  const read = (id: string) => site.admin.get(`/jobs/${id}`).expect(200);
  /** Changes a row as no request can. */
  const change = (id: string, what: string) =>
    withClient(site.hub.superuserUrl, (client) =>
      client.query(`update jobs set ${what} where id = $1`, [id]),
    );
  const eventsAbout = async (id: string) => {
    const { body } = await site.admin.get(`/audit-entries?projectId=${site.projectId}&limit=200`).expect(200);
    type Entry = { subject: string; action: string; actor: object };
    return body.data.filter(({ subject }: Entry) => subject === id) as Entry[];
  };

  it('is answered 202 with where it is, and says when to ask again until it has ended', async () => {
    const begun = await start();
    expect(begun.headers.location).toBe(`/api/v1/jobs/${begun.body.id}`);
    expect(begun.headers['retry-after']).toBe('1');
    expect(begun.body).toMatchObject({
      kind: 'adjustment',
      status: 'queued',
      projectId: site.projectId,
      progress: null,
      result: null,
      problem: null,
      attempts: 0,
      startedAt: null,
      finishedAt: null,
    });
    const waiting = await read(begun.body.id);
    expect(waiting.body).toEqual(begun.body);
    expect(waiting.headers['retry-after']).toBe('1');

    expect(await runJobOf(site, begun.body.id)).toBe('succeeded');
    const ended = await read(begun.body.id);
    expect(ended.headers).not.toHaveProperty('retry-after');
    expect(ended.body).toMatchObject({ status: 'succeeded', attempts: 1, progress: null });
    const path = ended.body.result.replace('/api/v1', '');
    const { body: adjustment } = await site.admin.get(path).expect(200);
    expect(adjustment.job).toEqual({ id: begun.body.id, status: 'succeeded' });
    expect(await eventsAbout(begun.body.id)).toMatchObject([
      { action: 'job.succeeded', actor: { kind: 'job', id: null } },
    ]);
  });

  it('stands in the queue of its organization, so that nobody waits for all jobs of another', async () => {
    const begun = await start();
    const { rows } = await withClient(site.hub.superuserUrl, (client) =>
      client.query('select queue_name from graphile_worker.jobs where key = $1', [begun.body.id]),
    );
    expect(rows).toEqual([{ queue_name: site.organizationId }]);
  });

  it('is begun once by an Idempotency-Key, and its repetition says where it is too', async () => {
    const once = () => site.admin.post(site.at('/adjustments'), NETWORK).set('Idempotency-Key', 'network-1');
    const [first, second] = [await once().expect(202), await once().expect(202)];
    expect(second.body).toEqual(first.body);
    expect(second.headers['idempotency-replayed']).toBe('true');
    expect(second.headers.location).toBe(first.headers.location);
  });

  it('is done once, however often the queue brings it', async () => {
    const { body } = await start();
    const outcomes = await Promise.all([1, 2, 3].map(() => runJobOf(site, body.id)));
    expect(outcomes.filter((outcome) => outcome === 'succeeded')).toHaveLength(1);
    expect(await runJobOf(site, body.id)).toBe('nothing to do');
    expect(await eventsAbout(body.id)).toHaveLength(1);
  });

  it('is cancelled at once while it waits, and cancelling again is harmless', async () => {
    const { body } = await start();
    const cancelled = await site.admin.post(`/jobs/${body.id}/cancel`).expect(200);
    expect(cancelled.body).toMatchObject({ status: 'cancelled', cancelRequested: false });
    expect(cancelled.body.finishedAt).not.toBeNull();
    expect((await site.admin.post(`/jobs/${body.id}/cancel`).expect(200)).body).toEqual(cancelled.body);
    expect(await runJobOf(site, body.id)).toBe('nothing to do');
    expect(await eventsAbout(body.id)).toMatchObject([{ action: 'job.cancelled', actor: { kind: 'key' } }]);
  });

  it('is asked to stop while it runs, and stops before its next step', async () => {
    const { body } = await start();
    await change(body.id, `status = 'running', attempts = 1, started_at = now()`);
    const asked = await site.admin.post(`/jobs/${body.id}/cancel`).expect(200);
    expect(asked.body).toMatchObject({ status: 'running', cancelRequested: true });
    expect(asked.headers['retry-after']).toBe('1');
    await site.admin.post(`/jobs/${body.id}/cancel`).expect(200);
    const requested = { action: 'job.cancelRequested', actor: { kind: 'key' } };
    expect(await eventsAbout(body.id)).toMatchObject([requested]);
    const { body: feed } = await site.admin.get('/events?type=job.cancelRequested&limit=200').expect(200);
    const told = feed.data.filter(({ subject }: { subject: string }) => subject === body.id);
    expect(told).toMatchObject([{ projectId: site.projectId, data: { kind: 'adjustment' } }]);
    expect(await runJobOf(site, body.id)).toBe('nothing to do');
    expect((await read(body.id)).body).toMatchObject({ status: 'cancelled', result: null });
  });

  it('is not cancelled after it has ended', async () => {
    const { body } = await start();
    await runJobOf(site, body.id);
    expectProblem(await site.admin.post(`/jobs/${body.id}/cancel`), 'job_finished');
  });

  it('fails with a problem that says what is lacking, and is not tried again', async () => {
    const empty = { ...NETWORK, until: '2001-01-01T00:00:00Z' };
    const { body } = await site.admin.post(site.at('/adjustments'), empty).expect(202);
    expect(await runJobOf(site, body.id)).toBe('failed');
    const { body: failed } = await read(body.id);
    expect(failed).toMatchObject({
      status: 'failed',
      result: null,
      problem: {
        type: '/reference/problems/adjustment_not_computable',
        status: 422,
        instance: `/api/v1/jobs/${body.id}`,
      },
    });
    expect(failed.problem.detail).toMatch(/no setup and no level run fits/);
    expect(await runJobOf(site, body.id)).toBe('nothing to do');
    expect(await eventsAbout(body.id)).toMatchObject([{ action: 'job.failed' }]);
  });

  it('is given up after so many workers that died of it', async () => {
    const { body } = await start();
    await change(body.id, `status = 'running', attempts = 5, started_at = now()`);
    expect(await runJobOf(site, body.id)).toBe('nothing to do');
    expect((await read(body.id)).body).toMatchObject({
      status: 'failed',
      attempts: 5,
      problem: { code: 'job_given_up' },
    });
  });

  it('is tried again where the hub itself failed, until it is given up', async () => {
    const { body } = await start();
    // What is asked of it is nothing that the hub ever writes.
    await withClient(site.hub.superuserUrl, (client) =>
      client.query(`update adjustments set request = '{}' where job_id = $1`, [body.id]),
    );
    for (let attempt = 1; attempt < 5; attempt++) {
      await expect(runJobOf(site, body.id)).rejects.toThrow('to be tried again');
      expect((await read(body.id)).body).toMatchObject({
        status: 'queued',
        attempts: attempt,
        problem: null,
      });
    }
    expect(await runJobOf(site, body.id)).toBe('given up');
    expect((await read(body.id)).body).toMatchObject({
      status: 'failed',
      attempts: 5,
      problem: { code: 'job_given_up', status: 500 },
    });
  });

  it('is seen by keys of its project alone', async () => {
    const { body } = await start();
    const elsewhere = await newSite(site.admin, 'Elsewhere');
    const bound = site.as(await site.newKey(['jobs:read', 'jobs:write'], [elsewhere.projectId]));
    expectProblem(await bound.get(`/jobs/${body.id}`), 'not_found');
    expectProblem(await bound.post(`/jobs/${body.id}/cancel`), 'not_found');
    expect((await bound.get('/jobs').expect(200)).body.data).toEqual([]);
    expectProblem(await bound.get(`/jobs?projectId=${site.projectId}`), 'not_found');
    const own = site.as(await site.newKey(['jobs:read'], [site.projectId]));
    expect((await own.get(`/jobs/${body.id}`).expect(200)).body.id).toBe(body.id);
  });

  it('stands in the list, newest first, by status and project, page by page', async () => {
    const other = await newSiteOrganization();
    const begun = [await start(other), await start(other), await start(other)].map(({ body }) => body.id);
    await runJobOf(other, begun[0]);
    const ids = async (query: string) => {
      const { body } = await other.admin.get(`/jobs?${query}`).expect(200);
      return body.data.map(({ id }: { id: string }) => id);
    };
    expect(await ids('')).toEqual(begun.toReversed());
    expect(await ids('status=queued')).toEqual([begun[2], begun[1]]);
    expect(await ids(`projectId=${other.projectId}&kind=adjustment&status=failed`)).toEqual([begun[0]]);
    const first = await other.admin.get('/jobs?limit=2').expect(200);
    const rest = await other.admin.get(`/jobs?limit=2&cursor=${first.body.nextCursor}`).expect(200);
    expect(rest.body.data.map(({ id }: { id: string }) => id)).toEqual([begun[0]]);
  });
});
