import { and, eq } from 'drizzle-orm';
import { people } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { Problem } from '@/lib/problem';
import type { PersonRow } from './present';

/** @throws Problem where the organization has no such person */
export async function loadPerson(
  tenant: Tenant,
  organizationId: string,
  personId: string,
  lock = false,
): Promise<PersonRow> {
  const query = tenant.db
    .select()
    .from(people)
    .where(and(eq(people.organizationId, organizationId), eq(people.id, personId)));
  const [row] = await (lock ? query.for('update') : query);
  if (!row) throw new Problem('not_found', 'There is no such person.');
  return row;
}
