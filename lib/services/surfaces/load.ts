import { and, eq } from 'drizzle-orm';
import { surfaces } from '@/db/schema';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';

/** @throws Problem where the project has no such surface */
export async function loadSurface({ tenant, caller }: VerbContext, projectId: string, surfaceId: string) {
  const [row] = await tenant.db
    .select()
    .from(surfaces)
    .where(
      and(
        eq(surfaces.organizationId, caller.organizationId),
        eq(surfaces.projectId, projectId),
        eq(surfaces.id, surfaceId),
      ),
    );
  if (!row) throw new Problem('not_found', 'There is no such surface in this project.');
  return row;
}
