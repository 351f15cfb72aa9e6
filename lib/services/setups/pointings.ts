import { asc, ne } from 'drizzle-orm';
import { controlPoints } from '@/db/schema';
import { rayTo } from '@/lib/compute/survey/ray';
import { wrapTurn } from '@/lib/compute/units/angles';
import { toAzimuth, toDegrees } from '@/lib/compute/units/convert';
import type { VerbContext } from '@/lib/services/context';
import { currentControl } from '@/lib/services/control/load';
import { Lengths } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/setups';
import { loadSetup } from './load';

type Read = typeof contract.getPointings;

/** Turn-to values from a setup to every control point that is not quarantined, face left. */
export async function readPointings(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
) {
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const loaded = await loadSetup(tenant, organizationId, project.id, params.setupId);
  const { station, surroundings, heightDetermined, orientationDetermined } = loaded.result.result;
  const length = new Lengths(query.length ?? project.lengthUnit);
  const targetHeight = length.in(query.targetHeight);
  const points = await currentControl(
    tenant,
    organizationId,
    project.id,
    ne(controlPoints.status, 'quarantined'),
  ).orderBy(asc(controlPoints.name));
  const data = points.flatMap(({ point, version }) => {
    const [east, north] = [version.easting - station.easting, version.northing - station.northing];
    // The mark that the instrument stands on has no direction.
    if (Math.hypot(east, north) < 0.01) return [];
    const hasHeight = heightDetermined && version.elevation !== null;
    const up = hasHeight ? version.elevation! + targetHeight - station.axis : 0;
    const ray = rayTo(east, north, up, station.refraction, surroundings);
    return [
      {
        target: point.name,
        kind: version.kind,
        status: point.status,
        horizontal: orientationDetermined ? toAzimuth(wrapTurn(ray.azimuth - station.orientation)) : null,
        zenith: hasHeight ? toDegrees(ray.zenith) : null,
        slopeDistance: hasHeight ? length.out(ray.slope) : null,
        horizontalDistance: length.out(ray.grid / surroundings.combinedFactor),
      },
    ];
  });
  const units = { length: length.unit, angle: 'deg' as const };
  return { setupId: loaded.setup.id, targetHeight: query.targetHeight, units, data };
}
