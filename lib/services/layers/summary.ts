import { and, asc, eq } from 'drizzle-orm';
import { gradeChecks, setups } from '@/db/schema';
import { deviationStatistics } from '@/lib/compute/grade/acceptance';
import { gradeLabel } from '@/lib/compute/grade/label';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject, type ProjectRow } from '@/lib/services/projects/load';
import { voidedBy } from '@/lib/services/setups/force';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/design';
import { judgeLot } from './judgeLot';
import { currentLayer, type LayerRow } from './load';
import type { LotCheck } from './lotChecks';
import { radioOfLot } from './lotRadio';

type Read = typeof contract.getLayerSummary;
/** Bias, spread and share within tolerance of the checks on a layer's present version, with a verdict. */
export async function readLayerSummary(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const layer = await currentLayer(tenant, project, params.layerName);
  if (!layer) throw new Problem('not_found', `There is no layer ${params.layerName} in this project.`);
  const rows = await loadChecks({ tenant, caller }, project, layer);
  const inForce = rows.filter(isStanding);
  const checks = inForce.flatMap(({ deviation, ...check }): LotCheck[] =>
    deviation === null ? [] : [{ ...check, deviation }],
  );
  const statistics = deviationStatistics(
    checks.map(({ deviation }) => deviation),
    layer,
  );
  const length = new Lengths(query.length ?? project.lengthUnit);
  const judged = judgeLot(layer, checks, statistics.percentWithinLimits, length);
  const { verdict, reasons } = judged;
  const count = (verdict: LotCheck['verdict']) => checks.filter((check) => check.verdict === verdict).length;
  const mean = length.outOrNull(statistics.mean);
  return {
    layer: layer.name,
    layerVersion: layer.version,
    offset: length.out(layer.offset),
    tolerance: { below: length.out(layer.below), above: length.out(layer.above), citation: layer.citation },
    count: statistics.count,
    mean,
    standardDeviation: length.outOrNull(statistics.standardDeviation),
    rmse: length.outOrNull(statistics.rmse),
    withinTolerance: statistics.withinTolerance,
    percentWithinLimits: statistics.percentWithinLimits,
    cutVolume: null,
    fillVolume: null,
    verdicts: { pass: count('pass'), hold: count('hold'), fail: count('fail') },
    notCounted: { outside: inForce.length - checks.length, notInForce: rows.length - inForce.length },
    label: mean === null ? null : gradeLabel(mean, project.displayDecimals),
    verdict,
    reasons,
    radio: radioOfLot(layer.name, judged, statistics, project.displayDecimals, length),
    units: { length: length.unit },
  };
}

function loadChecks(
  { tenant, caller }: Pick<VerbContext, 'tenant' | 'caller'>,
  project: ProjectRow,
  layer: LayerRow,
) {
  return tenant.db
    .select({
      name: gradeChecks.clientId,
      easting: gradeChecks.easting,
      northing: gradeChecks.northing,
      deviation: gradeChecks.deviation,
      verdict: gradeChecks.verdict,
      inForce: gradeChecks.inForce,
      setup: { state: setups.state, verdict: setups.verdict, withdrawnAt: setups.withdrawnAt },
    })
    .from(gradeChecks)
    .leftJoin(
      setups,
      and(eq(setups.organizationId, gradeChecks.organizationId), eq(setups.id, gradeChecks.setupId)),
    )
    .where(
      and(
        eq(gradeChecks.organizationId, caller.organizationId),
        eq(gradeChecks.projectId, project.id),
        eq(gradeChecks.layerName, layer.name),
        eq(gradeChecks.layerVersion, layer.version),
      ),
    )
    .orderBy(asc(gradeChecks.observedAt), asc(gradeChecks.id));
}

/** Shot from a setup in force, which has not been withdrawn, refitted or found wrong since. */
function isStanding({ inForce, setup }: Awaited<ReturnType<typeof loadChecks>>[number]): boolean {
  return inForce && (setup === null || (setup.withdrawnAt === null && voidedBy(setup) === null));
}
