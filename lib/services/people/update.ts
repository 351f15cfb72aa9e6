import { and, eq, ne, sql } from 'drizzle-orm';
import { people } from '@/db/schema';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { record } from '@/lib/services/record';
import { endSessions } from '@/lib/services/sessions/end';
import type { JsonOf, ParamsOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/people';
import { loadPerson } from './load';
import { presentPerson } from './present';
import { requireOwnRole, requireReach } from './reach';

type Update = typeof contract.updatePerson;

/** Another name or role, or the account closed or opened again; closing ends its sessions at once. */
export async function updatePerson(
  context: VerbContext,
  { params, body }: { params: ParamsOf<Update>; body: JsonOf<Update> },
) {
  const { tenant, caller } = context;
  const { organizationId } = caller;
  const before = await loadPerson(tenant, organizationId, params.personId, true);
  requireReach(caller, before);
  if (body.role !== undefined) requireOwnRole(caller, body.role);
  const active = before.passwordHash === null ? ('invited' as const) : ('active' as const);
  const change = {
    name: body.name ?? before.name,
    role: body.role ?? before.role,
    status:
      body.status === undefined ? before.status : body.status === 'closed' ? ('closed' as const) : active,
  };
  const row = { ...before, ...change };
  if (before.role === 'admin' && (row.role !== 'admin' || row.status === 'closed'))
    await requireOtherAdmin(context, row.id);
  const mine = and(eq(people.organizationId, organizationId), eq(people.id, row.id));
  await tenant.db.update(people).set(change).where(mine);
  if (row.status === 'closed') await endSessions(context, row);
  record(context, caller, { type: 'person.changed', subject: row.id, data: { changed: body } });
  return presentPerson(row);
}

/** The last administrator cannot leave: nobody could let anybody in again. Leaving is done one after the other. */
async function requireOtherAdmin({ tenant, caller }: VerbContext, personId: string): Promise<void> {
  const leaving = `${caller.organizationId}/leaving`;
  await tenant.db.execute(sql`select pg_advisory_xact_lock(hashtextextended(${leaving}, 0))`);
  const [other] = await tenant.db
    .select({ one: sql`1` })
    .from(people)
    .where(
      and(
        eq(people.organizationId, caller.organizationId),
        eq(people.role, 'admin'),
        eq(people.status, 'active'),
        ne(people.id, personId),
      ),
    )
    .limit(1);
  if (!other) throw new Problem('conflict', 'This is the last administrator: make another one first.');
}
