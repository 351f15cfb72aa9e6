import { sql } from 'drizzle-orm';
import { directory, organizations } from '@/db/schema';
import { directoryTransaction, type Tenant, tenantTransaction } from '@/db/tenant';
import { hashPassword, isWeakPassword } from '@/lib/access/passwords';
import { invalid, Problem } from '@/lib/problem';
import type { PublicContext } from '@/lib/services/context';
import { asMoment } from '@/lib/services/moments';
import { addPerson } from '@/lib/services/people/add';
import { record } from '@/lib/services/record';
import { openSession } from '@/lib/services/sessions/open';

/** Held while the first organization is made, so that two welcomes at once make one. */
const FIRST_LOCK = 7_203_116;

async function isEmpty(tenant: Tenant): Promise<boolean> {
  const { rows } = await tenant.db.execute<{ empty: boolean }>(
    sql`select not exists (select from ${directory}) as empty`,
  );
  return rows[0].empty;
}

/** Whether the hub waits for its first administrator. */
export async function readHub(): Promise<{ empty: boolean }> {
  return { empty: await directoryTransaction(isEmpty) };
}

/** Makes the first organization with its administrator, once, and signs the administrator in. */
export async function createOrganization(
  context: PublicContext,
  { body }: { body: { name: string; administrator: { name: string; email: string; password: string } } },
) {
  const { runtime } = context;
  const { administrator } = body;
  if (isWeakPassword(administrator.password)) throw invalid('/administrator/password', 'password_weak');
  if (!(await readHub()).empty) throw new Problem('hub_not_empty');
  const passwordHash = await hashPassword(administrator.password);
  const organizationId = runtime.uuid();
  const createdAt = runtime.now().toISOString();
  return tenantTransaction(organizationId, async (tenant) => {
    await tenant.db.execute(sql`select pg_advisory_xact_lock(${FIRST_LOCK})`);
    if (!(await isEmpty(tenant))) throw new Problem('hub_not_empty');
    await tenant.db.insert(organizations).values({ id: organizationId, name: body.name, createdAt });
    const { name, email } = administrator;
    const person = await addPerson({ ...context, tenant }, organizationId, {
      name,
      email,
      role: 'admin',
      passwordHash,
    });
    record(
      { ...context, tenant },
      { kind: 'person', organizationId, personId: person.id, name },
      { type: 'organization.created', subject: organizationId },
    );
    const session = await openSession({ ...context, tenant }, person);
    return {
      organization: { id: organizationId, name: body.name, createdAt: asMoment(createdAt) },
      person,
      session,
    };
  });
}
