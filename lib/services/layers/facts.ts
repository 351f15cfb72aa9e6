import { and, eq, or, sql } from 'drizzle-orm';
import { layers, surfaces } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { GradeRow } from '@/lib/services/gradeChecks/present';
import type { ProjectRow } from '@/lib/services/projects/load';

/** What a check's layer says at the version it was checked against. */
export interface LayerFacts {
  offset: number;
  below: number;
  above: number;
  represents: 'finish' | 'subgrade' | 'base' | 'ground' | 'other';
  surfaceSha256: string;
}

/** The layers of grade checks in the versions that they were checked against. */
export async function layerFacts(
  tenant: Tenant,
  project: Pick<ProjectRow, 'organizationId' | 'id'>,
  rows: readonly Pick<GradeRow, 'layerName' | 'layerVersion'>[],
): Promise<(row: Pick<GradeRow, 'layerName' | 'layerVersion'>) => LayerFacts> {
  const keys = new Map(rows.map((row) => [`${row.layerName}\n${row.layerVersion}`, row]));
  if (keys.size === 0) {
    return () => {
      throw new Error('No layer was loaded.');
    };
  }
  const found = await tenant.db
    .select({
      name: layers.name,
      version: layers.version,
      offset: layers.offset,
      below: layers.below,
      above: layers.above,
      represents: surfaces.represents,
      surfaceSha256: sql<string>`encode(${surfaces.sha256}, 'hex')`,
    })
    .from(layers)
    .innerJoin(
      surfaces,
      and(eq(surfaces.organizationId, layers.organizationId), eq(surfaces.id, layers.surfaceId)),
    )
    .where(
      and(
        eq(layers.organizationId, project.organizationId),
        eq(layers.projectId, project.id),
        or(
          ...[...keys.values()].map((row) =>
            and(eq(layers.name, row.layerName), eq(layers.version, row.layerVersion)),
          ),
        ),
      ),
    );
  const facts = new Map(found.map((layer) => [`${layer.name}\n${layer.version}`, layer]));
  return (row) => facts.get(`${row.layerName}\n${row.layerVersion}`)!;
}
