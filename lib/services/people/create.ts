import type { VerbContext } from '@/lib/services/context';
import { record } from '@/lib/services/record';
import type { JsonOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/people';
import { addPerson } from './add';
import { invite } from './invite';
import { requireOwnRole } from './reach';

/** Makes an account that waits for its invitation to be accepted. */
export async function createPerson(
  context: VerbContext,
  { body }: { body: JsonOf<typeof contract.createPerson> },
) {
  const { caller } = context;
  requireOwnRole(caller, body.role);
  const row = await addPerson(context, caller.organizationId, { ...body, passwordHash: null });
  record(context, caller, {
    type: 'person.invited',
    subject: row.id,
    data: { name: row.name, role: row.role },
  });
  return invite(context, row);
}
