import type { InferSelectModel } from 'drizzle-orm';
import { and, eq } from 'drizzle-orm';
import { projects } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import { DEFAULT_SURROUNDINGS, type Surroundings } from '@/lib/compute/survey/surroundings';
import { Problem } from '@/lib/problem';

export type ProjectRow = InferSelectModel<typeof projects>;

/**
 * @param lock until the end of the transaction against changes, not against rows that point to it
 * @throws Problem where the organization has no such project
 */
export async function loadProject(
  tenant: Tenant,
  organizationId: string,
  projectId: string,
  lock = false,
): Promise<ProjectRow> {
  const query = tenant.db
    .select()
    .from(projects)
    .where(and(eq(projects.organizationId, organizationId), eq(projects.id, projectId)));
  const [row] = await (lock ? query.for('no key update') : query);
  if (!row) throw new Problem('not_found', 'There is no such project.');
  return row;
}

export function surroundingsOf(
  project: Pick<ProjectRow, 'combinedFactor' | 'refraction' | 'refractionSigma'>,
): Surroundings {
  const { combinedFactor, refraction, refractionSigma } = project;
  return { ...DEFAULT_SURROUNDINGS, combinedFactor, refraction, refractionSigma };
}
