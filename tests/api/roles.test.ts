import { beforeAll, describe, expect, it } from 'vitest';
import { ROLE_SCOPES, ROLES, type Role } from '@/openapi/scopes';
import { signIn } from './fixtures/session';
import {
  document,
  FINISH,
  newLayer,
  newSiteOrganization,
  resection,
  type SiteOrganization,
} from './fixtures/site';

/** What each role may do, in deeds: the words of the issue, not the list of scopes in the product. */
const DEEDS: Record<string, { may: readonly Role[]; path: string; body?: object }> = {
  'open a project': {
    may: ['admin', 'surveyor'],
    path: '/projects',
    body: { name: 'By role', lengthUnit: 'ft', frame: { kind: 'local' } },
  },
  'bring in control': {
    may: ['admin', 'surveyor'],
    path: 'control-points',
    body: { units: { length: 'ft' }, points: [{ name: 'R-1', easting: 1, northing: 1 }] },
  },
  'bring in a surface': { may: ['admin', 'surveyor'], path: 'surfaces', body: FINISH },
  'post observations': { may: ['admin', 'surveyor', 'inspector'], path: 'uploads', body: {} },
  'release a setup': { may: ['admin', 'surveyor'], path: 'setups/{setup}/release', body: {} },
  'withdraw a setup': { may: ['admin', 'surveyor', 'inspector'], path: 'setups/{setup}/withdraw', body: {} },
  'refit a setup': { may: ['admin', 'surveyor'], path: 'setups/{setup}/refits', body: {} },
  'answer a withdrawal': {
    may: ['admin', 'surveyor', 'foreman'],
    path: 'acknowledgements/{acknowledgement}/acknowledge',
    body: {},
  },
  'adjust a network': { may: ['admin', 'surveyor'], path: 'adjustments', body: {} },
  'apply an adjustment': { may: ['admin', 'surveyor'], path: 'adjustments/{setup}/apply', body: {} },
  'read adjustments': { may: ROLES, path: 'adjustments' },
  'follow jobs': { may: ROLES, path: '/jobs' },
  'cancel a job': { may: ['admin', 'surveyor'], path: '/jobs/{setup}/cancel', body: {} },
  'read the control': { may: ROLES, path: 'control-points' },
  'read the setups': { may: ROLES, path: 'setups' },
  'read what was sent in': { may: ROLES, path: 'uploads' },
  'read the grade checks': { may: ROLES, path: 'grade-checks' },
  'follow events': { may: ROLES, path: '/events' },
  'read the audit trail': { may: ['admin', 'surveyor', 'inspector'], path: '/audit-entries' },
  'see people': { may: ['admin', 'surveyor', 'inspector'], path: '/people' },
  'see API keys': { may: ['admin'], path: '/api-keys' },
  'make API keys': { may: ['admin'], path: '/api-keys', body: {} },
  'see webhook endpoints': { may: ['admin'], path: '/webhook-endpoints' },
  'make webhook endpoints': { may: ['admin'], path: '/webhook-endpoints', body: {} },
  'invite people': { may: ['admin'], path: '/people', body: {} },
};

describe('the roles', () => {
  let site: SiteOrganization;
  const sessions = {} as Record<Role, Awaited<ReturnType<typeof signIn>>>;
  const ids = { setup: '', acknowledgement: '' };
  beforeAll(async () => {
    site = await newSiteOrganization();
    await newLayer(site.admin, site.at);
    const { body } = await site.upload(document('r', { setups: [resection('r-1'), resection('r-2')] }));
    ids.setup = body.setups[0].id;
    const path = site.at(`/setups/${body.setups[1].id}`);
    await site.admin.post(`${path}/release`, { machine: 'DZ-3', layer: 'subgrade' }).expect(200);
    const withdrawal = await site.admin.post(`${path}/withdraw`, {}).expect(200);
    ids.acknowledgement = withdrawal.body.acknowledgements[0].id;
    for (const role of ROLES)
      sessions[role] = await signIn(site.hub.url, site.people[role].email, site.people[role].password);
  });

  it.each(ROLES)('sign %s in with the scopes of the role', (role) => {
    expect(sessions[role].answer.body).toMatchObject({ role, scopes: ROLE_SCOPES[role] });
  });

  it.each(Object.entries(DEEDS))('%s', async (_, { may, path, body }) => {
    const address = path.replace('{setup}', ids.setup).replace('{acknowledgement}', ids.acknowledgement);
    const full = address.startsWith('/') ? address : site.at(`/${address}`);
    const allowed: Role[] = [];
    for (const role of ROLES) {
      const answer = await (body ? sessions[role].post(full, body) : sessions[role].get(full));
      expect(answer.status).not.toBe(401);
      if (answer.status !== 403) allowed.push(role);
      else
        expect(answer.body.detail).toMatch(new RegExp(`^The role ${role} lacks the scope [a-z]+:[a-z]+\\.$`));
    }
    expect(allowed).toEqual(may);
  });
});
