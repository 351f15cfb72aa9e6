import { and, desc, eq, inArray } from 'drizzle-orm';
import type * as z from 'zod';
import { controlPointVersions, observations, setups } from '@/db/schema';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { asMoment } from '@/lib/services/moments';
import { loadProject } from '@/lib/services/projects/load';
import { completeSetups } from '@/lib/services/setups/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/control';
import type { ControlHistory } from '@/openapi/schemas/control';
import { presentCoordinates } from './present';
import { loadControlPoint } from './read';

type Read = typeof contract.getControlPointHistory;

const MAX_SETUPS = 200;

/** All versions of a point, and what it showed in every setup whose fit it was in. */
export async function readControlHistory(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
): Promise<z.output<typeof ControlHistory>> {
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const { point } = await loadControlPoint(tenant, organizationId, project.id, params.pointName);
  const unit = query.length ?? project.lengthUnit;
  const length = new Lengths(unit);
  const versions = await tenant.db
    .select()
    .from(controlPointVersions)
    .where(
      and(
        eq(controlPointVersions.organizationId, organizationId),
        eq(controlPointVersions.projectId, project.id),
        eq(controlPointVersions.name, point.name),
      ),
    )
    .orderBy(desc(controlPointVersions.version));
  const seenIn = tenant.db
    .selectDistinct({ id: observations.setupId })
    .from(observations)
    .where(
      and(
        eq(observations.organizationId, organizationId),
        eq(observations.projectId, project.id),
        eq(observations.target, point.name),
      ),
    );
  const rows = await tenant.db
    .select()
    .from(setups)
    .where(
      and(
        eq(setups.organizationId, organizationId),
        eq(setups.projectId, project.id),
        inArray(setups.rootId, seenIn),
      ),
    )
    .orderBy(desc(setups.observedAt), desc(setups.id))
    .limit(MAX_SETUPS);
  const complete = await completeSetups(tenant, organizationId, rows);
  return {
    name: point.name,
    status: point.status,
    versions: versions.map((version) => ({
      version: version.version,
      ...presentCoordinates(version, unit),
      createdAt: asMoment(version.createdAt),
      createdBy: version.createdBy,
    })),
    residuals: complete.flatMap(({ setup, result }) =>
      result.result.marks
        .filter((mark) => mark.name === point.name)
        .map((mark) => ({
          setupId: setup.id,
          station: setup.station,
          observedAt: asMoment(setup.observedAt),
          version: mark.version,
          residual: {
            easting: length.outOrNull(mark.residual.easting),
            northing: length.outOrNull(mark.residual.northing),
            elevation: length.outOrNull(mark.residual.elevation),
          },
        })),
    ),
    units: { length: unit },
  };
}
