import { beforeAll, describe, expect, it } from 'vitest';
import { type Api, api } from '@/tests/setup/api';
import { newOrganization } from '@/tests/setup/organization';

describe('who is asking', () => {
  let organization: Awaited<ReturnType<typeof newOrganization>>;
  let admin: Api;
  beforeAll(async () => {
    organization = await newOrganization();
    admin = api(organization.hub.url, organization.key);
  });

  it('answers the key, its responsible person and its scopes', async () => {
    const { body } = await admin.get('/whoami').expect(200);
    expect(body).toMatchObject({ kind: 'key', personId: organization.people.admin.id, projectIds: null });
  });

  it('refuses a request without a credential, and says how to send one', async () => {
    const response = await api(organization.hub.url).get('/whoami').expect(401);
    expect(response.headers['www-authenticate']).toMatch(/^Bearer/);
    expect(response.body.code).toBe('unauthenticated');
  });
});
