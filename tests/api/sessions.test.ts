import supertest from 'supertest';
import { beforeAll, describe, expect, it } from 'vitest';
import { api } from '@/tests/setup/api';
import { newOrganization } from '@/tests/setup/organization';
import { whileHeld, withClient } from './fixtures/database';
import { expectProblem, withoutRequest } from './fixtures/problems';
import { signIn } from './fixtures/session';

describe('sessions', () => {
  let organization: Awaited<ReturnType<typeof newOrganization>>;
  let url: string;
  beforeAll(async () => {
    organization = await newOrganization();
    url = organization.hub.url;
  });

  const enter = (role: 'admin' | 'surveyor' | 'foreman' = 'surveyor') => {
    const { email, password } = organization.people[role];
    return signIn(url, email, password);
  };
  const project = (name: string) => ({ name, lengthUnit: 'ft', frame: { kind: 'local' } });

  it('open with e-mail and password, in a cookie that no script reads and no other site sends', async () => {
    const { answer, setCookie, get } = await enter();
    expect(answer.status).toBe(201);
    expect(answer.body).toMatchObject({
      kind: 'person',
      personId: organization.people.surveyor.id,
      role: 'surveyor',
      organization: { id: organization.organizationId },
      projectIds: null,
    });
    expect(setCookie).toMatch(
      /^hubtack_session=[\w-]+\.[\w-]+\.[\w-]+; Path=\/; HttpOnly; SameSite=Lax; Expires=/,
    );
    const { body } = await get('/whoami').expect(200);
    expect(body).toEqual(answer.body);
    const stays = Date.parse(body.expiresAt) - Date.now();
    expect(stays).toBeGreaterThan(6.9 * 86_400_000);
  });

  it('take an address without regard to case or the blanks around it', async () => {
    const { email, password } = organization.people.foreman;
    const { answer } = await signIn(url, ` ${email.toUpperCase()} `, password);
    expect(answer.status).toBe(201);
  });

  it('tell nothing of whether an address exists', async () => {
    const wrong = await signIn(url, organization.people.foreman.email, 'three loud herons');
    const unknown = await signIn(
      url,
      `nobody-${organization.organizationId}@test.example`,
      'three loud herons',
    );
    expectProblem(wrong.answer, 'sign_in_failed');
    expect(withoutRequest(unknown.answer)).toEqual(withoutRequest(wrong.answer));
    expect(unknown.answer.headers['set-cookie']).toBeUndefined();
    const { date: _a, 'request-id': _b, ...headers } = wrong.answer.headers;
    expect(unknown.answer.headers).toMatchObject(headers);
  });

  it('do not open with a password, or an account, that ends while it is verified', async () => {
    const ending = await newOrganization();
    const { id, email, password } = ending.people.inspector;
    const lock = `select 1 from people where id = '${id}' for update`;
    const changes = ['status = $$closed$$', 'status = $$active$$, password_hash = $$of another$$'];
    for (const change of changes.map((set) => `update people set ${set} where id = '${id}'`)) {
      const answer = await whileHeld(ending.hub.superuserUrl, { lock, change }, 1, async () => {
        return (await signIn(url, email, password)).answer;
      });
      expectProblem(answer, 'sign_in_failed');
      await withClient(ending.hub.superuserUrl, (client) =>
        client.query(`update people set status = 'active' where id = $1`, [id]),
      );
    }
  });

  it('end at once on signing out, everywhere the cookie is', async () => {
    const session = await enter();
    const other = await enter();
    const out = await session.delete('/sessions/current').expect(204);
    expect(out.headers['set-cookie'][0]).toMatch(/^hubtack_session=; .*Expires=Thu, 01 Jan 1970/);
    expectProblem(await session.get('/whoami'), 'session_ended');
    await other.get('/whoami').expect(200);
    const key = api(url, organization.key);
    expectProblem(await key.delete('/sessions/current'), 'forbidden');
  });

  it('end with their time, and cannot be made up', async () => {
    const session = await enter();
    await withClient(organization.hub.superuserUrl, (client) =>
      client.query(
        `update sessions set expires_at = now() - interval '1 second' where organization_id = $1`,
        [organization.organizationId],
      ),
    );
    expectProblem(await session.get('/whoami'), 'session_ended');
    const standing = await enter();
    const [name, token] = standing.cookie.split('=');
    const [head, body, signature] = token.split('.');
    const forged = [
      `${head}.${body}.${signature.slice(0, -3)}AAA`,
      `${head}.${body}.`,
      `${Buffer.from('{"alg":"none"}').toString('base64url')}.${body}.`,
      'x',
      '%',
    ];
    for (const value of forged) {
      const answer = await supertest(url).get('/api/v1/whoami').set('Cookie', `${name}=${value}`);
      expectProblem(answer, 'session_ended');
    }
    await standing.get('/whoami').expect(200);
  });

  it('count for writes from the hub’s own pages alone', async () => {
    const session = await enter('admin');
    const write = (name: string, headers: Record<string, string>) =>
      session.bare('post', '/projects').set(headers).send(project(name));
    await write('own origin', { Origin: url }).expect(201);
    await write('own site', { 'Sec-Fetch-Site': 'same-origin' }).expect(201);
    const refused: Record<string, string>[] = [
      {},
      { Origin: 'https://evil.example' },
      { Origin: 'null' },
      { Origin: 'nonsense' },
      { Origin: `${url}0` },
      { 'Sec-Fetch-Site': 'cross-site' },
      { 'Sec-Fetch-Site': 'same-site' },
      { 'Sec-Fetch-Site': 'none' },
      { Origin: 'https://evil.example', 'Sec-Fetch-Site': 'same-origin' },
    ];
    for (const headers of refused) expectProblem(await write('refused', headers), 'cross_site');
    // Reading does no harm, and a key needs no origin.
    await session.bare('get', '/projects').expect(200);
    await api(url, organization.key)
      .post('/projects', project('key'))
      .set('Origin', 'https://evil.example')
      .expect(201);
  });

  it('need a declared media type for what they write', async () => {
    const session = await enter('admin');
    for (const type of ['text/plain', 'application/x-www-form-urlencoded', 'multipart/form-data'])
      expectProblem(
        await session
          .bare('post', '/projects')
          .set({ Origin: url, 'Content-Type': type })
          .send('{"name":"x"}'),
        'media_type_unsupported',
      );
  });

  it('are not opened for another site', async () => {
    const { email, password } = organization.people.admin;
    const answer = await supertest(url)
      .post('/api/v1/sessions')
      .set('Origin', 'https://evil.example')
      .send({ email, password });
    expectProblem(answer, 'cross_site');
  });

  it('yield to a key where both come', async () => {
    const session = await enter('foreman');
    const answer = await session
      .get('/whoami')
      .set('Authorization', `Bearer ${organization.key}`)
      .expect(200);
    expect(answer.body.kind).toBe('key');
    const wrong = await session.get('/whoami').set('Authorization', 'Bearer htk_wrong');
    expectProblem(wrong, 'unauthenticated');
  });

  it('end with the account, and so do its keys', async () => {
    const admin = api(url, organization.key);
    const invited = await admin.post('/people', {
      name: 'Cy Marsh',
      email: `cy-${organization.organizationId}@test.example`,
      role: 'surveyor',
    });
    const accepted = await supertest(url)
      .post('/api/v1/invitations/acceptances')
      .send({ token: invited.body.invitation.token, password: 'nine patient otters' })
      .expect(201);
    const cookie = accepted.headers['set-cookie'][0].split(';')[0];
    const whoami = () => supertest(url).get('/api/v1/whoami').set('Cookie', cookie);
    await whoami().expect(200);
    const personId = invited.body.person.id;
    const made = await admin
      .post('/api-keys', { name: 'of Cy', scopes: ['events:read'], responsiblePersonId: personId })
      .expect(201);
    await api(url, made.body.secret).get('/whoami').expect(200);

    await admin.patch(`/people/${personId}`, { status: 'closed' }).expect(200);
    expectProblem(await whoami(), 'session_ended');
    expectProblem(await api(url, made.body.secret).get('/whoami'), 'key_revoked');
    const again = await signIn(url, invited.body.person.email, 'nine patient otters');
    expectProblem(again.answer, 'sign_in_failed');
    const key = { name: 'x', scopes: ['events:read'], responsiblePersonId: personId };
    expectProblem(await admin.post('/api-keys', key), 'invalid', ['/responsiblePersonId person_unknown']);
    expectProblem(await admin.post(`/people/${personId}/invitations`), 'not_found');
  });

  it('follow the role of the person at once', async () => {
    const session = await enter('foreman');
    const admin = api(url, organization.key);
    const path = `/people/${organization.people.foreman.id}`;
    expectProblem(await session.get('/audit-entries'), 'forbidden');
    await admin.patch(path, { role: 'inspector' }).expect(200);
    await session.get('/audit-entries').expect(200);
    await admin.patch(path, { role: 'foreman' }).expect(200);
    expectProblem(await session.get('/audit-entries'), 'forbidden');
  });

  it('are throttled by account after ten failures, right password or wrong, and by that account alone', async () => {
    const throttled = await newOrganization();
    const { email, password } = throttled.people.analyst;
    for (let i = 0; i < 10; i++) expect((await signIn(url, email, `wrong ${i}`)).answer.status).toBe(401);
    for (const attempt of ['wrong again', password]) {
      const { answer } = await signIn(url, email, attempt);
      expectProblem(answer, 'too_many_requests');
      expect(Number(answer.headers['retry-after'])).toBeGreaterThan(800);
      expect(Number(answer.headers['retry-after'])).toBeLessThanOrEqual(900);
    }
    const other = throttled.people.admin;
    expect((await signIn(url, other.email, other.password)).answer.status).toBe(201);
  });
});
