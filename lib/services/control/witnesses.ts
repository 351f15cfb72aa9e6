import { sql } from 'drizzle-orm';
import type { Tenant } from '@/db/tenant';
import { isWitness } from '@/lib/compute/survey/controlHealth';
import type { WitnessLevel, WitnessSetup } from '@/lib/compute/survey/jointModel';
import type { ControlMark, Shot } from '@/lib/compute/survey/shots';
import { adjustStation, StationError } from '@/lib/compute/survey/stationAdjustment';
import { runDifferences } from '@/lib/services/levelRuns/differences';
import { touches } from '@/lib/services/levelRuns/load';
import type { SetupResult } from '@/lib/services/setups/result';

/** Setups that are heard on a mark: the newest. What is older has been answered or moved over since. */
export const MOST_WITNESSES = 40;

/** A setup that saw a mark, or a level run that touched it, as it is told of. */
export interface WitnessFacts {
  kind: 'setup' | 'levelRun';
  id: string;
  station: string;
  observedAt: string;
  receivedAt: string;
  /** Null for a level run. */
  crew: string | null;
}

export interface Witnesses {
  setups: WitnessSetup[];
  levels: WitnessLevel[];
  facts: Map<string, WitnessFacts>;
}

interface WitnessRow extends Record<string, unknown> {
  id: string;
  station: string;
  observed_at: string;
  created_at: string;
  submitted_by: string;
  accuracy: SetupResult['accuracy'];
  surroundings: SetupResult['surroundings'];
  ppm: number | null;
  explanations: SetupResult['explanations'];
  converged: boolean;
  residual: WitnessSetup['residual'];
  marks: ControlMark[];
  shots: Shot[];
}

/**
 * The newest setups that shot any of these marks, each as it was first observed, whatever refits left out: with the
 * marks in the versions that it used, adjusted anew from its shots.
 */
export async function loadWitnesses(
  tenant: Tenant,
  organizationId: string,
  projectId: string,
  names: readonly string[],
): Promise<Witnesses> {
  const seen = sql.join(
    names.map((name) => sql`${name}`),
    sql`, `,
  );
  const { rows } = await tenant.db.execute<WitnessRow>(sql`
    select s.id, s.station, s.observed_at::text, s.created_at::text, s.submitted_by,
      r.result -> 'accuracy' as accuracy, r.result -> 'surroundings' as surroundings, (r.result ->> 'ppm')::float8 as ppm,
      r.result -> 'explanations' as explanations, (r.result ->> 'converged')::boolean as converged,
      r.result -> 'limits' -> 'residual' as residual,
      (select coalesce(json_agg(json_build_object('name', v.name, 'version', v.version, 'easting', v.easting,
          'northing', v.northing, 'elevation', v.elevation, 'horizontalSigma', v.sigma_horizontal,
          'verticalSigma', v.sigma_vertical, 'status', 'trusted')), '[]')
        from (select m ->> 'name' as name, (m ->> 'version')::int as version
            from json_array_elements(r.result -> 'marks') m
          union select m ->> 'name', (m ->> 'version')::int from json_array_elements(r.result -> 'leftOut') m) used
        join control_point_versions v on v.organization_id = s.organization_id and v.project_id = s.project_id
          and v.name = used.name and v.version = used.version) as marks,
      (select coalesce(json_agg(json_build_object('id', o.client_id, 'target', o.target, 'purpose', o.purpose,
          'face', o.face, 'set', o."set", 'direction', o.direction, 'zenith', o.zenith,
          'distance', case when o.slope_distance is null then null else json_build_object(
            'slopeDistance', o.slope_distance, 'prismConstantMm', coalesce(o.prism_constant_mm, 0),
            'prismConstantAppliedMm', coalesce(o.prism_constant_applied_mm, 0),
            'appliedPpm', coalesce(o.applied_ppm, 0)) end,
          'targetHeight', o.target_height, 'targetCentringSigma', o.target_centring_sigma,
          'targetHeightSigma', o.target_height_sigma) order by o.seq), '[]')
        from observations o where o.organization_id = s.organization_id and o.setup_id = s.id
          and o.check_id is null and o.purpose = 'orient') as shots
    from setups s
    join setup_results r on r.organization_id = s.organization_id and r.setup_id = s.id and r.version = 1
    where s.organization_id = ${organizationId} and s.project_id = ${projectId} and s.root_id = s.id
      and s.method <> 'backsight'
      and s.id in (select o.setup_id from observations o where o.organization_id = ${organizationId}
        and o.project_id = ${projectId} and o.target in (${seen}) and o.purpose = 'orient')
    order by s.observed_at desc, s.id desc limit ${MOST_WITNESSES}`);
  const facts = new Map<string, WitnessFacts>(
    rows.map((row) => [
      row.id,
      {
        kind: 'setup',
        id: row.id,
        station: row.station,
        observedAt: row.observed_at,
        receivedAt: row.created_at,
        crew: row.submitted_by,
      },
    ]),
  );
  const levels = rows.length === 0 ? [] : await loadLevels(tenant, organizationId, projectId, names, facts);
  return { facts, levels, setups: rows.flatMap((row) => asWitness(row) ?? []) };
}

/** Level runs that close and touched any of these marks, between marks in the versions that they used; told of among the facts. */
async function loadLevels(
  tenant: Tenant,
  organizationId: string,
  projectId: string,
  names: readonly string[],
  facts: Map<string, WitnessFacts>,
): Promise<WitnessLevel[]> {
  const runs = await runDifferences(
    tenant,
    { organizationId, projectId },
    touches(tenant, organizationId, names),
  );
  return runs.flatMap(({ from, to, difference, weight, run, control }): WitnessLevel[] => {
    const [low, high] = [from, to].map((name) => control.find((mark) => mark.name === name));
    if (!low || !high || weight.by !== 'sigma') return [];
    const { id, clientId, observedAt, createdAt } = run;
    facts.set(id, {
      kind: 'levelRun',
      id,
      station: clientId,
      observedAt,
      receivedAt: createdAt,
      crew: null,
    });
    return [{ id, from: low, to: high, difference, sigma: weight.sigma, observedAt: Date.parse(observedAt) }];
  });
}

/** Null for a setup that is not heard: it did not converge, or a fault of its own explains it best. */
function asWitness(row: WitnessRow): WitnessSetup | null {
  if (!isWitness(row)) return null;
  const control = new Map(row.marks.map((mark) => [mark.name, mark]));
  const { accuracy, surroundings, ppm } = row;
  const shots = row.shots.filter(({ target }) => control.has(target));
  try {
    const adjusted = adjustStation({ shots, control, accuracy, surroundings, ppm });
    if (!adjusted.solution.converged) return null;
    return { id: row.id, observedAt: Date.parse(row.observed_at), adjusted, residual: row.residual };
  } catch (error) {
    if (error instanceof StationError) return null;
    throw error;
  }
}
