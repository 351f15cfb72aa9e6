import { closeDatabase, tenantTransaction } from '@/db/tenant';
import { hashPassword } from '@/lib/access/passwords';
import { systemRuntime as runtime } from '@/lib/runtime';
import { issueKey } from '@/lib/services/apiKeys/issue';
import { createOrganization, readHub } from '@/lib/services/organizations/create';
import { addPerson } from '@/lib/services/people/add';
import { ROLES, SCOPE_NAMES } from '@/openapi/scopes';

/**
 * Fills an empty hub: an organization, a person for each role with a random password, and one API key that runs the
 * whole main job. Prints them as one line of JSON; where an organization exists it changes nothing.
 */
const PEOPLE = {
  admin: 'Ida Merrow',
  surveyor: 'Tove Lindqvale',
  foreman: 'Rafe Ostler',
  inspector: 'Nell Varga-Holt',
  analyst: 'Suri Pendrake',
} as const;

const password = () => runtime.random(12).toString('base64url');
const mail = (role: string) => `${role}@larkspur.example`;

if (!(await readHub()).empty) {
  console.log(JSON.stringify({ created: false }));
} else {
  const context = { runtime, requestId: 'demo', address: 'localhost' };
  const signIns = ROLES.map((role) => ({ role, email: mail(role), password: password() }));
  const [admin, ...others] = signIns;
  const administrator = { name: PEOPLE.admin, email: admin.email, password: admin.password };
  const { organization, person } = await createOrganization(context, {
    body: { name: 'Larkspur Earthworks', administrator },
  });
  const hashes = await Promise.all(others.map((other) => hashPassword(other.password)));
  const key = await tenantTransaction(organization.id, async (tenant) => {
    for (const [i, { role, email }] of others.entries()) {
      await addPerson({ ...context, tenant }, organization.id, {
        name: PEOPLE[role],
        email,
        role,
        passwordHash: hashes[i],
      });
    }
    const { secret } = await issueKey({ ...context, tenant }, organization.id, {
      name: 'demo walk',
      scopes: SCOPE_NAMES,
      projectIds: null,
      responsiblePersonId: person.id,
      expiresAt: null,
    });
    return secret;
  });
  console.log(JSON.stringify({ created: true, people: signIns, key }));
}
await closeDatabase();
