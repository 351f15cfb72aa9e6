import supertest from 'supertest';
import { beforeAll, describe, expect, it } from 'vitest';
import { newSecret } from '@/lib/access/secrets';
import { systemRuntime } from '@/lib/runtime';
import { ROLE_SCOPES } from '@/openapi/scopes';
import { type Api, api } from '@/tests/setup/api';
import { newOrganization } from '@/tests/setup/organization';
import { withClient } from './fixtures/database';
import { expectProblem } from './fixtures/problems';
import { signIn } from './fixtures/session';

const PASSWORD = 'seven slow badgers';

describe('people', () => {
  let organization: Awaited<ReturnType<typeof newOrganization>>;
  let admin: Api;
  let url: string;
  beforeAll(async () => {
    organization = await newOrganization();
    url = organization.hub.url;
    admin = api(url, organization.key);
  });

  const address = (name: string) => `${name}-${organization.organizationId}@test.example`;
  const invite = async (name: string, role = 'surveyor') =>
    (await admin.post('/people', { name, email: address(name), role }).expect(201)).body;
  const accept = (token: string, password = PASSWORD) =>
    supertest(url).post('/api/v1/invitations/acceptances').send({ token, password });

  it('are invited, accept, and are signed in', async () => {
    const { person, invitation } = await invite('Dee', 'inspector');
    expect(person).toMatchObject({ name: 'Dee', role: 'inspector', status: 'invited' });
    expect(invitation.token).toMatch(/^hti_[0-9A-Za-z]{33}$/);
    expect(invitation.path).toBe(`/invitation#${invitation.token}`);
    const days = (Date.parse(invitation.expiresAt) - Date.now()) / 86_400_000;
    expect(days).toBeGreaterThan(6.9);
    expectProblem((await signIn(url, person.email, PASSWORD)).answer, 'sign_in_failed');

    const { body } = await accept(invitation.token).expect(201);
    expect(body).toMatchObject({ kind: 'person', personId: person.id, role: 'inspector' });
    expect((await admin.get(`/people/${person.id}`)).body.status).toBe('active');
    expect((await signIn(url, person.email, PASSWORD)).answer.status).toBe(201);
    expectProblem(await accept(invitation.token), 'invitation_used');
  });

  it('lose an older invitation to a newer one', async () => {
    const { person, invitation } = await invite('Eli');
    const { body } = await admin.post(`/people/${person.id}/invitations`).expect(201);
    expect(body.invitation.token).not.toBe(invitation.token);
    expectProblem(await accept(invitation.token), 'invitation_used');
    await accept(body.invitation.token).expect(201);
  });

  it('get back in by a new invitation where the password is lost; the old one ends with it', async () => {
    const { person, invitation } = await invite('Fay');
    await accept(invitation.token).expect(201);
    const { body } = await admin.post(`/people/${person.id}/invitations`).expect(201);
    expect((await signIn(url, person.email, PASSWORD)).answer.status).toBe(201);
    await accept(body.invitation.token, 'eight quick badgers').expect(201);
    expectProblem((await signIn(url, person.email, PASSWORD)).answer, 'sign_in_failed');
    expect((await signIn(url, person.email, 'eight quick badgers')).answer.status).toBe(201);
  });

  it('lose their sessions with a password that is set anew', async () => {
    const { person, invitation } = await invite('Gus');
    const first = await accept(invitation.token).expect(201);
    const cookie = first.headers['set-cookie'][0].split(';')[0];
    const { body } = await admin.post(`/people/${person.id}/invitations`).expect(201);
    await accept(body.invitation.token, 'eight quick badgers').expect(201);
    expectProblem(await supertest(url).get('/api/v1/whoami').set('Cookie', cookie), 'session_ended');
  });

  it('are not let in by an invitation that ran out or was made up', async () => {
    const { invitation } = await invite('Hal');
    await withClient(organization.hub.superuserUrl, (client) =>
      client.query(
        `update people set invitation_expires_at = now() where organization_id = $1 and name = 'Hal'`,
        [organization.organizationId],
      ),
    );
    for (const token of [invitation.token, newSecret('hti', systemRuntime), 'hti_x', organization.key])
      expectProblem(await accept(token), 'invitation_used');
  });

  it.each(['short', 'password1234', 'aaaaaaaaaaaaaaa', 'Hubtack123456'])(
    'do not get the password %j',
    async (weak) => {
      const { invitation } = await invite(`weak-${weak}`);
      const problem = expectProblem(await accept(invitation.token, weak), 'invalid');
      expect(problem.errors?.[0].pointer).toBe('/password');
      expect(JSON.stringify(problem)).not.toContain(weak);
      await accept(invitation.token).expect(201);
    },
  );

  it('have addresses of their own, in every organization of the hub', async () => {
    const { person } = await invite('Ida');
    const body = { name: 'Other', email: person.email.toUpperCase(), role: 'foreman' };
    expectProblem(await admin.post('/people', body), 'email_taken');
    const other = await newOrganization();
    expectProblem(await api(url, other.key).post('/people', body), 'email_taken');
    expectProblem(await admin.post('/people', { ...body, email: 'nobody', role: 'king' }), 'invalid', [
      '/email invalid_value',
      '/role invalid_value',
    ]);
  });

  it('change name and role, and are closed and opened again', async () => {
    const { person, invitation } = await invite('Jo');
    await accept(invitation.token).expect(201);
    const path = `/people/${person.id}`;
    const changed = await admin.patch(path, { name: 'Jo Reed', role: 'foreman' }).expect(200);
    expect(changed.body).toMatchObject({ name: 'Jo Reed', role: 'foreman', status: 'active' });
    expect((await admin.patch(path, { status: 'closed' }).expect(200)).body.status).toBe('closed');
    expect((await admin.patch(path, { status: 'active' }).expect(200)).body.status).toBe('active');
    expect((await signIn(url, person.email, PASSWORD)).answer.status).toBe(201);
    expectProblem(await admin.patch(path, { email: 'x@example.com' }), 'invalid', ['/email unknown_field']);
  });

  it('are given no role, changed or let in anew by whoever may do less than they', async () => {
    const small = api(url, await organization.newKey(['people:write', 'people:read']));
    const { person } = await invite('Kit', 'foreman');
    const body = { name: 'Lou', email: address('lou'), role: 'admin' };
    expectProblem(await small.post('/people', body), 'invalid', ['/role scope_not_yours']);
    expectProblem(await small.patch(`/people/${person.id}`, { role: 'admin' }), 'forbidden');
    for (const { id } of [organization.people.admin, person]) {
      expectProblem(await small.post(`/people/${id}/invitations`), 'forbidden');
      for (const change of [{ status: 'closed' }, { role: 'analyst' }, { name: 'Nobody' }])
        expectProblem(await small.patch(`/people/${id}`, change), 'forbidden');
    }

    const scopes = ['people:write', ...ROLE_SCOPES.foreman] as const;
    const equal = api(url, await organization.newKey(scopes));
    expectProblem(await equal.patch(`/people/${person.id}`, { role: 'surveyor' }), 'invalid', [
      '/role scope_not_yours',
    ]);
    await equal.post(`/people/${person.id}/invitations`).expect(201);
    await equal.patch(`/people/${person.id}`, { role: 'analyst' }).expect(200);
    await equal.post('/people', { ...body, role: 'foreman' }).expect(201);
  });

  it('always keep one administrator', async () => {
    const lonely = await newOrganization();
    const owner = api(url, lonely.key);
    const path = `/people/${lonely.people.admin.id}`;
    expectProblem(await owner.patch(path, { role: 'surveyor' }), 'conflict');
    expectProblem(await owner.patch(path, { status: 'closed' }), 'conflict');
    await owner.patch(path, { name: 'Still here' }).expect(200);
    await owner.patch(`/people/${lonely.people.surveyor.id}`, { role: 'admin' }).expect(200);
    await owner.patch(path, { role: 'surveyor' }).expect(200);
  });

  it('keep one administrator where two leave at the same moment', async () => {
    for (let round = 0; round < 6; round++) {
      const pair = await newOrganization();
      const owner = api(url, pair.key);
      await owner.patch(`/people/${pair.people.surveyor.id}`, { role: 'admin' }).expect(200);
      const answers = await Promise.all(
        [pair.people.admin.id, pair.people.surveyor.id].map((id) =>
          owner.patch(`/people/${id}`, { role: 'foreman' }),
        ),
      );
      expect(answers.map(({ status }) => status).sort()).toEqual([200, 409]);
      const { body } = await owner.get('/people?limit=200');
      expect(body.data.filter((p: { role: string }) => p.role === 'admin')).toHaveLength(1);
    }
  });

  it('are made first on an empty hub alone', async () => {
    expect((await api(url).get('/hub').expect(200)).body).toEqual({ empty: false });
    const first = {
      name: 'Second',
      administrator: { name: 'Ada', email: address('ada'), password: 'three quiet herons' },
    };
    expectProblem(await api(url).post('/organizations', first), 'hub_not_empty');
  });
});
