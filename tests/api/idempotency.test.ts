import { beforeAll, describe, expect, it } from 'vitest';
import { withClient } from './fixtures/database';
import { expectProblem } from './fixtures/problems';
import { document, newSiteOrganization, resection, type SiteOrganization } from './fixtures/site';

describe('an Idempotency-Key', () => {
  let site: SiteOrganization;
  beforeAll(async () => {
    site = await newSiteOrganization();
  });

  const project = (name: string) => ({ name, lengthUnit: 'ft', frame: { kind: 'local' } });
  const create = (key: string, body: object, caller = site.admin) =>
    caller.post('/projects', body).set('Idempotency-Key', key);
  const count = async (name: string) => {
    const { body } = await site.admin.get('/projects?limit=200');
    return body.data.filter((p: { name: string }) => p.name === name).length;
  };

  it('answers a repetition with status and body of the first, and does nothing more', async () => {
    const first = await create('k-1', project('Once')).expect(201);
    expect(first.headers['idempotency-replayed']).toBeUndefined();
    const again = await create('k-1', project('Once')).expect(201);
    expect(again.headers['idempotency-replayed']).toBe('true');
    expect(again.text).toBe(first.text);
    expect(again.headers['request-id']).not.toBe(first.headers['request-id']);
    expect(await count('Once')).toBe(1);
  });

  it('may be written as a structured string', async () => {
    const first = await create('"k-2"', project('Quoted')).expect(201);
    expect((await create('k-2', project('Quoted')).expect(201)).text).toBe(first.text);
  });

  it('belongs to one request with one body and one address', async () => {
    await create('k-3', project('First')).expect(201);
    expectProblem(await create('k-3', project('Second')), 'idempotency_mismatch');
    const points = { units: { length: 'ft' }, points: [{ name: 'P', easting: 1, northing: 1 }] };
    const path = site.at('/control-points');
    await site.admin.post(path, points).set('Idempotency-Key', 'k-4').expect(201);
    const revised = await site.admin.post(`${path}?revise=true`, points).set('Idempotency-Key', 'k-4');
    expectProblem(revised, 'idempotency_mismatch');
  });

  it('is each caller’s own, and each operation’s', async () => {
    await create('k-5', project('Mine')).expect(201);
    const surveyor = site.as(site.people.surveyor.key);
    const other = await create('k-5', project('Theirs'), surveyor).expect(201);
    expect(other.body.name).toBe('Theirs');
    const instrument = { name: 'L-5', kind: 'level' };
    await site.admin.post(site.at('/instruments'), instrument).set('Idempotency-Key', 'k-5').expect(201);
  });

  it('is not used up by a request that fails', async () => {
    await create('k-6', { ...project('Fails'), lengthUnit: 'yd' }).expect(422);
    await create('k-6', project('Fails')).expect(201);
    await create('k-7', project('Fails')).expect(409);
    await create('k-7', project('Succeeds')).expect(201);
  });

  it('does not show a secret twice', async () => {
    const body = { name: 'once', scopes: ['events:read'] };
    const make = () => site.admin.post('/api-keys', body).set('Idempotency-Key', 'k-8');
    const first = await make().expect(201);
    expect(first.body.secret).toMatch(/^htk_/);
    expectProblem(await make(), 'secret_already_shown');
    const { body: list } = await site.admin.get('/api-keys?limit=200');
    expect(list.data.filter((k: { name: string }) => k.name === 'once')).toHaveLength(1);
    const kept = await withClient(site.hub.superuserUrl, (client) =>
      client.query('select body from idempotency_keys where organization_id = $1 and key = $2', [
        site.organizationId,
        'k-8',
      ]),
    );
    expect(kept.rows).toEqual([{ body: null }]);
  });

  it('makes one of many that arrive at the same moment', async () => {
    const answers = await Promise.all(Array.from({ length: 6 }, () => create('k-9', project('Crowd'))));
    expect(await count('Crowd')).toBe(1);
    const made = answers.filter(({ status }) => status === 201);
    expect(made.length).toBeGreaterThan(0);
    for (const { text } of made) expect(text).toBe(made[0].text);
    for (const answer of answers) {
      if (answer.status === 201) continue;
      expectProblem(answer, 'request_in_progress');
      expect(answer.headers['retry-after']).toBe('1');
    }
    expect((await create('k-9', project('Crowd')).expect(201)).text).toBe(made[0].text);
  });

  it('repeats the receipt of an upload', async () => {
    const sent = document('idem', { setups: [resection('idem')] });
    const post = () => site.upload(sent).set('Idempotency-Key', 'k-10');
    const first = await post().expect(201);
    const again = await post().expect(201);
    expect(again.text).toBe(first.text);
    expect(again.headers['idempotency-replayed']).toBe('true');
  });

  it('has 1 to 255 printable characters', async () => {
    for (const key of ['two words', '"open', 'ü', 'x'.repeat(256)]) {
      const answer = await create(key, project('Never'));
      expectProblem(answer, 'invalid', ['Idempotency-Key invalid_value']);
    }
    await create('x'.repeat(255), project('Longest')).expect(201);
    expect(await count('Never')).toBe(0);
  });

  it('means nothing to a read', async () => {
    const read = () => site.admin.get(site.at('')).set('Idempotency-Key', 'k-11');
    await read().expect(200);
    await site.admin.patch(site.at(''), { displayDecimals: 4 }).set('Idempotency-Key', 'k-11').expect(200);
    expect((await read()).body.displayDecimals).toBe(4);
  });
});
