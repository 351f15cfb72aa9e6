import { beforeAll, describe, expect, it } from 'vitest';
import { newSecret } from '@/lib/access/secrets';
import { systemRuntime } from '@/lib/runtime';
import { type Api, api } from '@/tests/setup/api';
import { newOrganization } from '@/tests/setup/organization';
import { withClient } from './fixtures/database';
import { minutesAgo } from './fixtures/moments';
import { expectProblem } from './fixtures/problems';

describe('API keys', () => {
  let organization: Awaited<ReturnType<typeof newOrganization>>;
  let admin: Api;
  const projects: string[] = [];
  beforeAll(async () => {
    organization = await newOrganization();
    admin = api(organization.hub.url, organization.key);
    for (const name of ['North', 'South']) {
      const body = { name, lengthUnit: 'ft', frame: { kind: 'local' } };
      projects.push((await admin.post('/projects', body).expect(201)).body.id);
    }
  });

  const as = (secret: string) => api(organization.hub.url, secret);
  const create = (body: object = {}, caller = admin) =>
    caller.post('/api-keys', { name: 'truck-2', scopes: ['projects:read', 'events:read'], ...body });
  const read = async (id: string) => (await admin.get(`/api-keys/${id}`).expect(200)).body;

  it('show their secret once, and keep only its hash', async () => {
    const { body } = await create().expect(201);
    expect(body.secret).toMatch(/^htk_[0-9A-Za-z]{33}$/);
    expect(body.apiKey).toMatchObject({
      name: 'truck-2',
      prefix: body.secret.slice(0, 10),
      scopes: ['projects:read', 'events:read'],
      projectIds: null,
      responsiblePersonId: organization.people.admin.id,
      status: 'active',
      expiresAt: null,
      revokedAt: null,
      lastUsedAt: null,
      successorId: null,
    });
    const list = await admin.get('/api-keys?limit=200').expect(200);
    for (const text of [JSON.stringify(await read(body.apiKey.id)), list.text])
      expect(text).not.toContain(body.secret.slice(10));
    const dump = await withClient(organization.hub.superuserUrl, (client) =>
      client.query('select to_json(k)::text as row from api_keys k where id = $1', [body.apiKey.id]),
    );
    expect(dump.rows[0].row).not.toContain(body.secret.slice(10));
    const { body: whoami } = await as(body.secret).get('/whoami').expect(200);
    expect(whoami).toMatchObject({
      kind: 'key',
      name: 'truck-2',
      role: null,
      personId: organization.people.admin.id,
      scopes: ['projects:read', 'events:read'],
    });
  });

  it('are refused before the database is asked where they are mistyped', async () => {
    const { secret } = (await create()).body;
    const swapped = secret.slice(0, 8) + (secret[8] === 'a' ? 'b' : 'a') + secret.slice(9);
    const odd = [
      swapped,
      `${secret}0`,
      secret.slice(0, -1),
      secret.toUpperCase(),
      'htk_',
      `hti_${secret.slice(4)}`,
    ];
    for (const wrong of odd) expectProblem(await as(wrong).get('/whoami'), 'unauthenticated');
    expectProblem(await as(newSecret('htk', systemRuntime)).get('/whoami'), 'unauthenticated');
    for (const header of ['Basic dTpw', 'Bearer', secret, `Bearer ${secret} x`, `Bearer  `]) {
      const answer = await api(organization.hub.url).get('/whoami').set('Authorization', header);
      expectProblem(answer, 'unauthenticated');
    }
    await api(organization.hub.url).get('/whoami').set('Authorization', `bearer ${secret}`).expect(200);
  });

  it('give no more than their maker has', async () => {
    const small = as(await organization.newKey(['keys:write', 'projects:read']));
    const answer = await create({ scopes: ['projects:read', 'people:write', 'audit:read'] }, small);
    expectProblem(answer, 'invalid', ['/scopes/1 scope_not_yours', '/scopes/2 scope_not_yours']);
    await create({ scopes: ['projects:read'] }, small).expect(201);
    expectProblem(await create({ scopes: [] }), 'invalid', ['/scopes invalid_value']);
    expectProblem(await create({ scopes: ['everything'] }), 'invalid', ['/scopes/0 invalid_value']);
  });

  it('stay within the projects of their maker', async () => {
    const bound = as(
      await organization.newKey(['keys:write', 'projects:read', 'events:read'], [projects[0]]),
    );
    expectProblem(await create({}, bound), 'invalid', ['/projectIds project_unknown']);
    const both = { projectIds: projects };
    expectProblem(await create(both, bound), 'invalid', ['/projectIds/1 project_unknown']);
    await create({ projectIds: [projects[0]] }, bound).expect(201);
    const unknown = { projectIds: ['0198f2b4-6c1e-7a35-9c0d-2b7f5d1e8a44'] };
    expectProblem(await create(unknown), 'invalid', ['/projectIds/0 project_unknown']);
  });

  it('bound to projects see those alone, and open none', async () => {
    const { body } = await create({ scopes: ['projects:read', 'projects:write'], projectIds: [projects[1]] });
    const bound = as(body.secret);
    const list = await bound.get('/projects').expect(200);
    expect(list.body.data.map((p: { id: string }) => p.id)).toEqual([projects[1]]);
    await bound.get(`/projects/${projects[1]}`).expect(200);
    expectProblem(await bound.get(`/projects/${projects[0]}`), 'not_found');
    const project = { name: 'More', lengthUnit: 'ft', frame: { kind: 'local' } };
    expectProblem(await bound.post('/projects', project), 'forbidden');
  });

  it('end at once when they are revoked', async () => {
    const { body } = await create();
    await as(body.secret).get('/whoami').expect(200);
    const revoked = await admin.post(`/api-keys/${body.apiKey.id}/revoke`).expect(200);
    expect(revoked.body).toMatchObject({ status: 'revoked' });
    expectProblem(await as(body.secret).get('/whoami'), 'key_revoked');
    expect((await admin.post(`/api-keys/${body.apiKey.id}/revoke`).expect(200)).body).toEqual(revoked.body);
    const rotate = await admin.post(`/api-keys/${body.apiKey.id}/rotate`, { overlapMinutes: 5 });
    expectProblem(rotate, 'conflict');
  });

  it('end with their time', async () => {
    expectProblem(await create({ expiresAt: minutesAgo(1) }), 'invalid', ['/expiresAt time_out_of_order']);
    const { body } = await create({ expiresAt: new Date(Date.now() + 1500).toISOString() }).expect(201);
    await as(body.secret).get('/whoami').expect(200);
    await new Promise((resolve) => setTimeout(resolve, 1600));
    expectProblem(await as(body.secret).get('/whoami'), 'key_expired');
    expect((await read(body.apiKey.id)).status).toBe('expired');
  });

  it('work on beside their successor for the overlap that was chosen', async () => {
    const { body: old } = await create({ projectIds: [projects[0]] });
    const { body: next } = await admin
      .post(`/api-keys/${old.apiKey.id}/rotate`, { overlapMinutes: 60 })
      .expect(201);
    expect(next.secret).not.toBe(old.secret);
    const { name, scopes, projectIds, responsiblePersonId } = old.apiKey;
    expect(next.apiKey).toMatchObject({ name, scopes, projectIds, responsiblePersonId, status: 'active' });
    await as(old.secret).get('/whoami').expect(200);
    await as(next.secret).get('/whoami').expect(200);
    const rotated = await read(old.apiKey.id);
    expect(rotated.successorId).toBe(next.apiKey.id);
    const left = (Date.parse(rotated.expiresAt) - Date.now()) / 60_000;
    expect(left).toBeGreaterThan(59);
    expect(left).toBeLessThanOrEqual(60);
    const again = await admin.post(`/api-keys/${old.apiKey.id}/rotate`, { overlapMinutes: 60 });
    expectProblem(again, 'conflict');
  });

  it('end at once when they are rotated without an overlap', async () => {
    const { body: old } = await create();
    const { body: next } = await admin
      .post(`/api-keys/${old.apiKey.id}/rotate`, { overlapMinutes: 0 })
      .expect(201);
    expectProblem(await as(old.secret).get('/whoami'), 'key_revoked');
    await as(next.secret).get('/whoami').expect(200);
  });

  it('never outlive their own end by an overlap', async () => {
    const expiresAt = new Date(Date.now() + 3_600_000).toISOString();
    const { body: old } = await create({ expiresAt });
    await admin.post(`/api-keys/${old.apiKey.id}/rotate`, { overlapMinutes: 600 }).expect(201);
    expect(Date.parse((await read(old.apiKey.id)).expiresAt)).toBe(Date.parse(expiresAt));
  });

  it('are not taken over by rotating what reaches further than oneself', async () => {
    const { body } = await create({ scopes: ['people:write'] });
    const small = as(await organization.newKey(['keys:write', 'projects:read', 'events:read']));
    const rotate = { overlapMinutes: 1 };
    const answer = await small.post(`/api-keys/${body.apiKey.id}/rotate`, rotate);
    expectProblem(answer, 'invalid', ['/scopes/0 scope_not_yours']);
    const { body: wide } = await create();
    const bound = as(
      await organization.newKey(['keys:write', 'projects:read', 'events:read'], [projects[0]]),
    );
    expectProblem(await bound.post(`/api-keys/${wide.apiKey.id}/rotate`, rotate), 'forbidden');
  });

  it('are not revoked by what reaches other projects than they', async () => {
    const bound = as(await organization.newKey(['keys:write'], [projects[0]]));
    for (const projectIds of [null, [projects[1]], projects]) {
      const { body } = await create({ projectIds });
      expectProblem(await bound.post(`/api-keys/${body.apiKey.id}/revoke`), 'forbidden');
      await as(body.secret).get('/whoami').expect(200);
    }
    const { body } = await create({ projectIds: [projects[0]] });
    await bound.post(`/api-keys/${body.apiKey.id}/revoke`).expect(200);
  });

  it('note their last use to the minute', async () => {
    const { body } = await create();
    const before = Date.now();
    await as(body.secret).get('/whoami').expect(200);
    const { lastUsedAt } = await read(body.apiKey.id);
    expect(Date.parse(lastUsedAt)).toBeGreaterThanOrEqual(before - 1);
    await as(body.secret).get('/whoami').expect(200);
    expect((await read(body.apiKey.id)).lastUsedAt).toBe(lastUsedAt);
  });

  it('count for their responsible person, whoever uses them', async () => {
    const responsiblePersonId = organization.people.surveyor.id;
    const { body } = await create({ responsiblePersonId }).expect(201);
    expect((await as(body.secret).get('/whoami')).body.personId).toBe(responsiblePersonId);
    const { body: list } = await admin.get('/audit-entries?action=apiKey.created&limit=1');
    expect(list.data[0]).toMatchObject({ subject: body.apiKey.id, details: { name: 'truck-2' } });
    expect(JSON.stringify(list.data)).not.toContain(body.secret.slice(10));
  });
});
