import { and, asc, eq } from 'drizzle-orm';
import { gradeChecks, setups } from '@/db/schema';
import { deviationStatistics, isWithin, windowRule } from '@/lib/compute/grade/acceptance';
import { gradeLabel } from '@/lib/compute/grade/label';
import { Problem } from '@/lib/problem';
import type { VerbContext } from '@/lib/services/context';
import { Lengths } from '@/lib/services/lengths';
import { loadProject, type ProjectRow } from '@/lib/services/projects/load';
import type { Words } from '@/lib/services/setups/words';
import type { ParamsOf, QueryOf } from '@/openapi/contract';
import type * as contract from '@/openapi/contracts/design';
import { currentLayer, type LayerRow } from './load';

type Read = typeof contract.getLayerSummary;
type Verdict = 'pass' | 'hold' | 'fail';

interface Check {
  deviation: number;
  verdict: Verdict;
}

/** Bias, spread and share within tolerance of the checks on a layer's present version, with a verdict. */
export async function readLayerSummary(
  { tenant, caller }: VerbContext,
  { params, query }: { params: ParamsOf<Read>; query: QueryOf<Read> },
) {
  const project = await loadProject(tenant, caller.organizationId, params.projectId);
  const layer = await currentLayer(tenant, project, params.layerName);
  if (!layer) throw new Problem('not_found', `There is no layer ${params.layerName} in this project.`);
  const rows = await loadChecks({ tenant, caller }, project, layer);
  const inForce = rows.filter((row) => row.inForce && row.setupWithdrawnAt === null);
  const checks = inForce.flatMap(({ deviation, verdict }): Check[] =>
    deviation === null ? [] : [{ deviation, verdict }],
  );
  const statistics = deviationStatistics(
    checks.map(({ deviation }) => deviation),
    layer,
  );
  const length = new Lengths(query.length ?? project.lengthUnit);
  const judged = judgeLot(layer, checks, statistics.percentWithinLimits, length);
  const count = (verdict: Verdict) => checks.filter((check) => check.verdict === verdict).length;
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
    ...judged,
    radio: radioOfLot(layer.name, judged.verdict, mean, statistics, project.displayDecimals, length),
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
      deviation: gradeChecks.deviation,
      verdict: gradeChecks.verdict,
      inForce: gradeChecks.inForce,
      setupWithdrawnAt: setups.withdrawnAt,
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

/** The lot by its rule; without one, by its points. Rules count plain readings, as their clauses do. */
function judgeLot(
  layer: LayerRow,
  checks: readonly Check[],
  percentWithinLimits: number | null,
  length: Lengths,
): { verdict: Verdict; reasons: Words[] } {
  if (checks.length === 0) {
    const text = 'No check counts yet.';
    return {
      verdict: 'hold',
      reasons: [{ code: 'no_checks', text, action: 'Shoot grade from a setup in force.' }],
    };
  }
  const within = checks.map(({ deviation }) => isWithin(deviation, layer));
  const outside = within.filter((inside) => !inside).length;
  const limits = `${length.text(layer.below)} low to ${length.text(layer.above)} high`;
  const rule = layer.acceptance;
  switch (rule?.rule) {
    case undefined: {
      const [fail, hold] = [count(checks, 'fail'), count(checks, 'hold')];
      const code = 'no_acceptance_rule';
      const text = `No acceptance rule is set; each point was judged on its own: ${fail} of ${checks.length} fail and ${hold} are held.`;
      return { verdict: fail > 0 ? 'fail' : hold > 0 ? 'hold' : 'pass', reasons: [{ code, text }] };
    }
    case 'everyPoint': {
      const text = `Every point must lie within ${limits} (${rule.citation}); ${outside} of ${checks.length} do not.`;
      return { verdict: outside > 0 ? 'fail' : 'pass', reasons: [{ code: 'every_point', text }] };
    }
    case 'window': {
      const met = windowRule(within, rule.required, rule.of);
      const clause = `${rule.required} of any ${rule.of} in a row must lie within ${limits} (${rule.citation})`;
      if (met === null) {
        const text = `${clause}; there are ${checks.length} so far.`;
        return { verdict: 'hold', reasons: [{ code: 'too_few_checks', text, action: 'Shoot more points.' }] };
      }
      const text = `${clause}: ${met ? 'met' : 'not met'}; ${outside} of ${checks.length} lie outside.`;
      return { verdict: met ? 'pass' : 'fail', reasons: [{ code: 'window', text }] };
    }
    case 'percentWithinLimits': {
      const clause = `${rule.minimum} % within limits are asked (${rule.citation})`;
      if (percentWithinLimits === null) {
        const text = `${clause}; three checks are the least, there are ${checks.length}.`;
        return { verdict: 'hold', reasons: [{ code: 'too_few_checks', text, action: 'Shoot more points.' }] };
      }
      const text = `${clause}; ${percentWithinLimits.toFixed(0)} % by quality index. The figure holds for points drawn at random.`;
      const verdict = percentWithinLimits >= rule.minimum ? 'pass' : 'fail';
      return { verdict, reasons: [{ code: 'percent_within_limits', text }] };
    }
  }
}

function count(checks: readonly Check[], verdict: Verdict): number {
  return checks.filter((check) => check.verdict === verdict).length;
}

/** One line to read out; it begins with the act. */
function radioOfLot(
  layer: string,
  verdict: Verdict,
  mean: number | null,
  { count: n, withinTolerance }: { count: number; withinTolerance: number },
  decimals: number,
  length: Lengths,
): string {
  if (mean === null) return `Wait. Nothing counts yet on ${layer}.`;
  const label = gradeLabel(mean, decimals);
  const size = `${Math.abs(mean).toFixed(decimals)} ${length.name}`;
  const bias =
    label === 'GRADE'
      ? 'on grade on average'
      : mean > 0
        ? `${size} high on average`
        : `${size} low on average`;
  const share = `${withinTolerance} of ${n} inside tolerance, ${bias}`;
  switch (verdict) {
    case 'pass':
      return `Accepted. ${layer}: ${share}.`;
    case 'hold':
      return `Wait. ${layer} is not proven yet: ${share}.`;
    case 'fail':
      return `Not accepted. ${layer}: ${share}.`;
  }
}
