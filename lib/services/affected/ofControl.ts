import { sql } from 'drizzle-orm';
import type * as z from 'zod';
import type { MarkHealth } from '@/lib/compute/survey/controlHealth';
import type { VerbContext } from '@/lib/services/context';
import { loadHealth } from '@/lib/services/control/health';
import { loadControlPoint } from '@/lib/services/control/read';
import type { Witnesses } from '@/lib/services/control/witnesses';
import { asMoment } from '@/lib/services/moments';
import { loadProject } from '@/lib/services/projects/load';
import type { Words } from '@/lib/services/setups/words';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/control';
import type { Affected } from '@/openapi/schemas/affected';
import { loadAffected } from './items';
import { presentAffected, type Since } from './present';

type Read = typeof contract.getControlPointAffected;

/** What hangs on a control point since it was last seen in its place. */
export async function readControlAffected(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
): Promise<z.output<typeof Affected>> {
  const { organizationId } = caller;
  const project = await loadProject(tenant, organizationId, params.projectId);
  const row = await loadControlPoint(tenant, organizationId, project.id, params.pointName);
  const { name, status } = row.point;
  const { health, witnesses } = await loadHealth(tenant, project, row);
  const since = sinceOf(name, health, witnesses);
  const used = sql`(exists (select 1 from setup_results r
        where r.organization_id = s.organization_id and r.setup_id = s.id and r.version = s.result_version
          and (r.result -> 'occupied' ->> 'name' = ${name} or exists (
            select 1 from json_array_elements(r.result -> 'marks') m where m ->> 'name' = ${name})))
      or exists (select 1 from setup_checks c, json_array_elements(c.result -> 'targets') t
        where c.organization_id = s.organization_id and c.setup_id = s.id and t ->> 'target' = ${name}))`;
  const page = await loadAffected(
    tenant,
    {
      organizationId,
      projectId: project.id,
      setups: since.at === null ? used : sql`s.observed_at > ${since.at}::timestamptz and ${used}`,
      told: sql`s.state <> 'superseded'`,
      benchmark: name,
      since: since.at,
    },
    ['affected-control', project.id, name],
    query,
  );
  return presentAffected(
    project.id,
    { kind: 'controlPoint', name, status },
    since,
    standing(name, status),
    page,
  );
}

/** The last setup that could have seen it off and found it in its place. */
function sinceOf(name: string, health: MarkHealth | null, { facts }: Witnesses): Since {
  const good = health?.lastInPlace ?? null;
  const fact = good === null ? undefined : facts.get(health!.sightings[good].source);
  if (!fact) {
    const text = `No setup has seen ${name} in its place: everything that used it is affected.`;
    return { at: null, checkId: null, setupId: null, text };
  }
  return {
    at: fact.observedAt,
    checkId: null,
    setupId: fact.kind === 'setup' ? fact.id : null,
    text: `Since ${fact.station} at ${asMoment(fact.observedAt)}, which still found it in its place.`,
  };
}

function standing(name: string, status: string): Words[] {
  if (status !== 'trusted') return [];
  return [
    {
      code: 'point_trusted',
      text: `${name} is trusted: this is what would be affected.`,
      action: `Quarantine ${name} if it has moved.`,
    },
  ];
}
