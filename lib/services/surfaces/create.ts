import { and, eq } from 'drizzle-orm';
import { surfaceData, surfaces } from '@/db/schema';
import { sha256 } from '@/lib/access/secrets';
import { surfaceBytes } from '@/lib/compute/grade/surfaceBytes';
import { planExtent } from '@/lib/compute/grade/tin';
import { invalidItems } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths, otherFoot } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import type { JsonOf, ParamsOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/design';
import { surfaceContent } from './content';
import { presentSurface, type SurfaceRow } from './present';

type Create = typeof contract.createSurface;

/** Brings in a surface under the hash of its content; equal content answers the surface that stands. */
export async function createSurface(
  context: VerbContext,
  { params, body }: { params: ParamsOf<Create>; body: JsonOf<Create> },
) {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const foot = otherFoot(project.lengthUnit, body.units.length, body.confirmUnits, '/units/length');
  if (foot) throw invalidItems([foot]);
  const length = new Lengths(project.lengthUnit);
  const content = surfaceContent(body);
  const bytes = Buffer.from(surfaceBytes(content));
  const hash = sha256(bytes);
  const [standing] = await tenant.db
    .select()
    .from(surfaces)
    .where(
      and(
        eq(surfaces.organizationId, organizationId),
        eq(surfaces.projectId, project.id),
        eq(surfaces.sha256, hash),
        eq(surfaces.represents, body.represents),
      ),
    );
  if (standing) return presentSurface(standing, length);

  const tin = content.kind === 'tin' ? content.tin : null;
  const extent = tin && planExtent(tin.points);
  const row: SurfaceRow = {
    organizationId,
    id: runtime.uuid(),
    projectId: project.id,
    name: body.name,
    represents: body.represents,
    kind: content.kind,
    sha256: hash,
    points: tin && tin.points.length / 3,
    triangles: tin && tin.triangles.length / 3,
    minEasting: extent?.minEast ?? null,
    maxEasting: extent?.maxEast ?? null,
    minNorthing: extent?.minNorth ?? null,
    maxNorthing: extent?.maxNorth ?? null,
    createdBy: caller.name,
    createdAt: runtime.now().toISOString(),
  };
  await tenant.db.insert(surfaceData).values({ organizationId, sha256: hash, bytes }).onConflictDoNothing();
  await tenant.db.insert(surfaces).values(row);
  record(context, caller, {
    type: 'surface.created',
    subject: row.id,
    projectId: project.id,
    data: { name: row.name, represents: row.represents, sha256: hash.toString('hex') },
  });
  return presentSurface(row, length);
}
