import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { record } from '@/lib/services/record';
import { invite } from './invite';
import { loadPerson } from './load';
import { requireReach } from './reach';

/** A new invitation, also for somebody whose password is lost. */
export async function reinvitePerson(context: VerbContext, { params }: { params: { personId: string } }) {
  const { tenant, caller } = context;
  const person = await loadPerson(tenant, caller.organizationId, params.personId, true);
  requireReach(caller, person);
  if (person.status === 'closed') throw new Problem('not_found', 'The account is closed.');
  record(context, caller, { type: 'person.reinvited', subject: person.id, data: { name: person.name } });
  return invite(context, person);
}
