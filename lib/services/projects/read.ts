import type { VerbContext } from '@/lib/services/context';
import { loadClasses } from './classes';
import { loadProject } from './load';
import { presentProject } from './present';

export async function readProject(
  { tenant, caller }: VerbContext,
  { params }: { params: { projectId: string } },
) {
  const row = await loadProject(tenant, caller.organizationId, params.projectId);
  return presentProject(row, await loadClasses(tenant, caller.organizationId, [row.id]));
}
