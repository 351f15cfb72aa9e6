import { and, asc, eq, inArray, type SQL } from 'drizzle-orm';
import { controlPoints, controlPointVersions } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { ControlMark } from '@/lib/compute/survey/shots';

/** Control points in their present versions. */
export function currentControl(tenant: Tenant, organizationId: string, projectId: string, further?: SQL) {
  return tenant.db
    .select({ point: controlPoints, version: controlPointVersions })
    .from(controlPoints)
    .innerJoin(
      controlPointVersions,
      and(
        eq(controlPointVersions.organizationId, controlPoints.organizationId),
        eq(controlPointVersions.projectId, controlPoints.projectId),
        eq(controlPointVersions.name, controlPoints.name),
        eq(controlPointVersions.version, controlPoints.currentVersion),
      ),
    )
    .where(
      and(eq(controlPoints.organizationId, organizationId), eq(controlPoints.projectId, projectId), further),
    );
}

/**
 * The same of some points, locked in the order of their names. Versions are read after the locks: a join that waits for
 * a lock sees the new number beside the old versions, and loses the row.
 */
export async function lockedControl(
  tenant: Tenant,
  organizationId: string,
  projectId: string,
  names: readonly string[],
): Promise<CurrentControl[]> {
  if (names.length === 0) return [];
  await tenant.db
    .select({ name: controlPoints.name })
    .from(controlPoints)
    .where(
      and(
        eq(controlPoints.organizationId, organizationId),
        eq(controlPoints.projectId, projectId),
        byNames(names),
      ),
    )
    .orderBy(asc(controlPoints.name))
    .for('update');
  return currentControl(tenant, organizationId, projectId, byNames(names));
}

export type CurrentControl = Awaited<ReturnType<typeof currentControl>>[number];

export function byNames(names: readonly string[]): SQL {
  return inArray(controlPoints.name, [...names]);
}

/** A control point as the engine takes it. */
export function asMark({ point, version }: CurrentControl): ControlMark {
  return {
    name: point.name,
    version: version.version,
    easting: version.easting,
    northing: version.northing,
    elevation: version.elevation,
    horizontalSigma: version.sigmaHorizontal,
    verticalSigma: version.sigmaVertical,
    status: point.status,
  };
}
