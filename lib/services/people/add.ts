import { databaseFault } from '@/db/faults';
import { directory, people } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { emailHandle, normalEmail } from '@/lib/access/secrets';
import { Problem } from '@/lib/problem';
import type { Runtime } from '@/lib/runtime';
import type { Role } from '@/openapi/scopes';
import type { PersonRow } from './present';

/**
 * Writes a person and the place of the address in the directory.
 *
 * @param passwordHash null for somebody who has yet to accept an invitation
 * @throws Problem where the address is in use
 */
export async function addPerson(
  { tenant, runtime }: { tenant: Tenant; runtime: Runtime },
  organizationId: string,
  person: { name: string; email: string; role: Role; passwordHash: string | null },
): Promise<PersonRow> {
  const row: PersonRow = {
    organizationId,
    id: runtime.uuid(),
    name: person.name,
    email: normalEmail(person.email),
    role: person.role,
    status: person.passwordHash === null ? 'invited' : 'active',
    passwordHash: person.passwordHash,
    invitationSha256: null,
    invitationExpiresAt: null,
    createdAt: runtime.now().toISOString(),
  };
  try {
    await tenant.db
      .insert(directory)
      .values({ handleSha256: emailHandle(row.email), organizationId, kind: 'email', subjectId: row.id });
  } catch (error) {
    if (databaseFault(error)?.kind === 'unique') throw new Problem('email_taken');
    throw error;
  }
  await tenant.db.insert(people).values(row);
  return row;
}
