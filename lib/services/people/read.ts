import type { VerbContext } from '@/lib/services/context';
import { loadPerson } from './load';
import { presentPerson } from './present';

export async function readPerson(
  { tenant, caller }: VerbContext,
  { params }: { params: { personId: string } },
) {
  return presentPerson(await loadPerson(tenant, caller.organizationId, params.personId));
}
