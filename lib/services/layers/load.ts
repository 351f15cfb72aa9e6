import { and, asc, desc, eq, gt, sql } from 'drizzle-orm';
import { layers, surfaces } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { ProjectRow } from '@/lib/services/projects/load';

const COLUMNS = {
  name: layers.name,
  version: layers.version,
  surfaceId: layers.surfaceId,
  offset: layers.offset,
  below: layers.below,
  above: layers.above,
  citation: layers.citation,
  acceptance: layers.acceptance,
  createdAt: layers.createdAt,
  represents: surfaces.represents,
  surfaceName: surfaces.name,
  surfaceSha256: sql<string>`encode(${surfaces.sha256}, 'hex')`,
};

/** Layers of a project in their present versions, by name. */
function currentLayers(
  tenant: Tenant,
  project: Pick<ProjectRow, 'organizationId' | 'id'>,
  after: string | null,
  name: string | null,
) {
  return tenant.db
    .selectDistinctOn([layers.name], COLUMNS)
    .from(layers)
    .innerJoin(
      surfaces,
      and(eq(surfaces.organizationId, layers.organizationId), eq(surfaces.id, layers.surfaceId)),
    )
    .where(
      and(
        eq(layers.organizationId, project.organizationId),
        eq(layers.projectId, project.id),
        after === null ? undefined : gt(layers.name, after),
        name === null ? undefined : eq(layers.name, name),
      ),
    )
    .orderBy(asc(layers.name), desc(layers.version));
}

export type LayerRow = Awaited<ReturnType<typeof currentLayers>>[number];

export function layersAfter(
  tenant: Tenant,
  project: ProjectRow,
  after: string | null,
  limit: number,
): Promise<LayerRow[]> {
  return currentLayers(tenant, project, after, null).limit(limit).execute();
}

export async function currentLayer(
  tenant: Tenant,
  project: ProjectRow,
  name: string,
): Promise<LayerRow | null> {
  const [row] = await currentLayers(tenant, project, null, name);
  return row ?? null;
}
