import { organizations } from '@/db/schema';
import { tenantTransaction } from '@/db/tenant';
import { hashPassword } from '@/lib/access/passwords';
import { systemRuntime as runtime } from '@/lib/runtime';
import { issueKey } from '@/lib/services/apiKeys/issue';
import { addPerson } from '@/lib/services/people/add';
import { ROLE_SCOPES, ROLES, type Role, SCOPE_NAMES, type Scope } from '@/openapi/scopes';
import { type HubDatabase, TEST_SECRET } from './hub';

export const PASSWORD = 'three quiet herons';

export interface TestPerson {
  id: string;
  email: string;
  password: string;
  /** A key with the scopes of the person's role, for which the person is responsible. */
  key: string;
}

let passwordHash: Promise<string> | undefined;

/**
 * An organization with a person for each role and a key for each person, written through the hub's own services. A
 * process speaks to one database only: the first.
 */
export async function callerRoles(database: Pick<HubDatabase, 'appUrl'>) {
  process.env.DATABASE_URL = database.appUrl;
  process.env.HUBTACK_SECRET ??= TEST_SECRET;
  passwordHash ??= hashPassword(PASSWORD);
  const hash = await passwordHash;
  const organizationId = runtime.uuid();
  const suffix = organizationId.slice(-12);
  const people = {} as Record<Role, TestPerson>;
  await tenantTransaction(organizationId, async (tenant) => {
    const context = { tenant, runtime };
    const createdAt = runtime.now().toISOString();
    await tenant.db
      .insert(organizations)
      .values({ id: organizationId, name: 'Thistledown Earthworks', createdAt });
    for (const role of ROLES) {
      const email = `${role}-${suffix}@test.example`;
      const person = await addPerson(context, organizationId, {
        name: `The ${role}`,
        email,
        role,
        passwordHash: hash,
      });
      const { secret } = await issueKey(context, organizationId, keyOf(person.id, ROLE_SCOPES[role]));
      people[role] = { id: person.id, email, password: PASSWORD, key: secret };
    }
  });
  /** Another key, with any scopes and projects. */
  const newKey = (
    scopes: readonly Scope[] = SCOPE_NAMES,
    projectIds: readonly string[] | null = null,
    person: Role = 'admin',
  ) =>
    tenantTransaction(organizationId, async (tenant) => {
      const key = { ...keyOf(people[person].id, scopes), projectIds };
      return (await issueKey({ tenant, runtime }, organizationId, key)).secret;
    });
  return { organizationId, people, newKey, key: people.admin.key };
}

function keyOf(responsiblePersonId: string, scopes: readonly Scope[]) {
  return { name: 'site script', scopes, projectIds: null, responsiblePersonId, expiresAt: null };
}
