import { isDeepStrictEqual } from 'node:util';
import { and, eq } from 'drizzle-orm';
import { layers, surfaces } from '@/db/schema';
import { invalid, invalidItems, Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths, otherFoot } from '@/lib/services/lengths';
import { loadProject } from '@/lib/services/projects/load';
import { record } from '@/lib/services/record';
import type { JsonOf, ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/design';
import { currentLayer, type LayerRow } from './load';
import { presentLayer } from './present';

type Create = typeof contract.createLayer;

/** Makes a layer, or a new version of one where that was asked for. */
export async function createLayer(
  context: VerbContext,
  { params, query, body }: { params: ParamsOf<Create>; query: QueryOf<Create>; body: JsonOf<Create> },
) {
  const { tenant, caller, runtime } = context;
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const foot = otherFoot(project.lengthUnit, body.units.length, body.confirmUnits, '/units/length');
  if (foot) throw invalidItems([foot]);
  const [surface] = await tenant.db
    .select()
    .from(surfaces)
    .where(
      and(
        eq(surfaces.organizationId, organizationId),
        eq(surfaces.projectId, project.id),
        eq(surfaces.id, body.surfaceId),
      ),
    );
  if (!surface) throw invalid('/surfaceId', 'surface_unknown');
  const length = new Lengths(body.units.length);
  const before = await currentLayer(tenant, project, body.name);
  const row: LayerRow = {
    name: body.name,
    version: (before?.version ?? 0) + 1,
    surfaceId: surface.id,
    offset: length.in(body.offset),
    below: length.in(body.tolerance.below),
    above: length.in(body.tolerance.above),
    citation: body.tolerance.citation ?? null,
    acceptance: body.acceptance ?? null,
    createdAt: runtime.now().toISOString(),
    represents: surface.represents,
    surfaceName: surface.name,
    surfaceSha256: surface.sha256.toString('hex'),
  };
  const shown = new Lengths(project.lengthUnit);
  if (before && isDeepStrictEqual(values(before), values(row))) return presentLayer(before, shown);
  if (before && query.revise !== 'true') throw new Problem('layer_exists');
  const { represents: _r, surfaceName: _n, surfaceSha256: _h, ...written } = row;
  await tenant.db
    .insert(layers)
    .values({ ...written, organizationId, projectId: project.id, createdBy: caller.name });
  record(context, caller, {
    type: before ? 'layer.revised' : 'layer.created',
    subject: row.name,
    projectId: project.id,
    data: { version: row.version, surfaceId: row.surfaceId, offset: shown.text(row.offset, 4) },
  });
  return presentLayer(row, shown);
}

function values({ version: _v, createdAt: _c, ...rest }: LayerRow) {
  return rest;
}
