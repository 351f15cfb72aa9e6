import { wrapTurn } from '@/lib/compute/units/angles';
import { toAzimuth, toMetres } from '@/lib/compute/units/convert';
import { invalidItems } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths, otherFoot } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import type { JsonOf, ParamsOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/design';
import { loadSurface } from './load';
import { openSurface } from './open';

type Query = typeof contract.querySurfaceElevations;

/** Elevation, slope and triangle at places of a surface; null outside of it. */
export async function querySurfaceElevations(
  context: VerbContext,
  { params, body }: { params: ParamsOf<Query>; body: JsonOf<Query> },
) {
  const { tenant, caller } = context;
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const foot = otherFoot(project.lengthUnit, body.units.length, body.confirmUnits, '/units/length');
  if (foot) throw invalidItems([foot]);
  const row = await loadSurface(context, project.id, params.surfaceId);
  const sha256 = row.sha256.toString('hex');
  const surface = await openSurface(tenant, caller.organizationId, sha256);
  const length = new Lengths(body.units.length);
  const data = body.points.map(({ easting, northing }) => {
    const found = surface.at(toMetres(easting, length.unit), toMetres(northing, length.unit));
    if (!found) return null;
    const { gradientEast, gradientNorth } = found;
    const slope = Math.hypot(gradientEast, gradientNorth);
    return {
      elevation: length.out(found.elevation),
      slopePercent: slope * 100,
      aspect: slope === 0 ? null : toAzimuth(wrapTurn(Math.atan2(-gradientEast, -gradientNorth))),
      triangle: found.triangle,
    };
  });
  return { surface: { id: row.id, sha256 }, units: { length: length.unit, angle: 'deg' as const }, data };
}
