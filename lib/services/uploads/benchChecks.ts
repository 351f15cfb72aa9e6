import { benchReading } from '@/lib/compute/grade/benchCheck';
import { toMetres } from '@/lib/compute/units/convert';
import type { CallerContext } from '@/lib/services/context';
import { isSameOffset } from '@/lib/services/layers/offset';
import { utcInstant } from '@/lib/services/moments';
import { forceFault } from '@/lib/services/setups/force';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Document } from './document';
import { type Draft, findSetup, pointerOf } from './draft';
import type { BenchRow, SiteSetup } from './site';

type BenchItem = Document['benchChecks'][number];

export function draftBenchChecks(draft: Draft, context: CallerContext): void {
  draft.document.benchChecks.forEach((item, index) => {
    draft.refused.push(...draftBench(draft, context, item, pointerOf(draft, 'benchChecks', index)));
  });
}

function draftBench(draft: Draft, context: CallerContext, item: BenchItem, pointer: string): ProblemItem[] {
  const { site } = draft;
  const { caller, runtime } = context;
  const { length } = draft.document.units;
  if (site.taken.bench.has(item.clientId)) {
    return [
      problemItem(
        `${pointer}/clientId`,
        'client_id_taken',
        `A bench check ${item.clientId} was accepted before.`,
      ),
    ];
  }
  const problems: ProblemItem[] = [];
  const benchmark = site.control.get(item.benchmark);
  if (!benchmark) {
    problems.push(
      problemItem(
        `${pointer}/benchmark`,
        'benchmark_unknown',
        `There is no control point ${item.benchmark} in this project.`,
      ),
    );
  } else if (benchmark.elevation === null) {
    problems.push(
      problemItem(
        `${pointer}/benchmark`,
        'benchmark_without_elevation',
        `${item.benchmark} has no elevation.`,
      ),
    );
  }
  const setup = item.setup === undefined ? null : findSetup(draft, item.setup);
  if (item.setup !== undefined && !setup) {
    problems.push(
      problemItem(`${pointer}/setup`, 'setup_unknown', `There is no setup ${item.setup} in this project.`),
    );
  }
  const layer = item.layer === undefined ? null : (site.layers.get(item.layer) ?? null);
  if (item.layer !== undefined && !layer) {
    problems.push(
      problemItem(`${pointer}/layer`, 'layer_unknown', `There is no layer ${item.layer} in this project.`),
    );
  }
  if (problems.length > 0 || !benchmark || benchmark.elevation === null) return problems;

  const observedAt = utcInstant(item.observedAt);
  const elevations = item.elevations.map((e) => toMetres(e, length));
  const tolerance = toMetres(item.tolerance, length);
  const activeOffset = item.activeOffset === undefined ? null : toMetres(item.activeOffset, length);
  const reading = benchReading(benchmark.elevation, elevations, tolerance);
  const holds = [
    ...unfit(benchmark.name, benchmark.status, setup, observedAt),
    ...(layer && activeOffset !== null && !isSameOffset(activeOffset, layer.offset)
      ? ['offset_differs']
      : []),
    ...(layer && item.surfaceSha256 !== undefined && item.surfaceSha256 !== layer.surfaceSha256
      ? ['surface_differs']
      : []),
    ...(reading.unsteady ? ['readings_unsteady'] : []),
  ];
  const reasons = [
    ...holds,
    ...(reading.verdict === 'fail' ? [reading.difference < 0 ? 'edge_low' : 'edge_high'] : []),
  ];
  const row: BenchRow = {
    organizationId: caller.organizationId,
    id: runtime.uuid(),
    projectId: site.project.id,
    clientId: item.clientId,
    uploadId: draft.uploadId,
    machine: item.machine,
    setupId: setup?.setup.id ?? null,
    benchmark: benchmark.name,
    benchmarkVersion: benchmark.version,
    edge: item.edge,
    elevations,
    knownElevation: benchmark.elevation,
    readElevation: reading.read,
    spread: reading.spread,
    difference: reading.difference,
    tolerance,
    layerName: layer?.name ?? null,
    layerVersion: layer?.version ?? null,
    surfaceSha256: item.surfaceSha256 === undefined ? null : Buffer.from(item.surfaceSha256, 'hex'),
    activeOffset,
    correctionAppliedFor: item.correctionAppliedFor ?? null,
    verdict: holds.length > 0 ? 'hold' : reading.verdict,
    reasons,
    observedAt,
  };
  draft.benchRows.push(row);
  draft.rows.benchChecks.push(row);
  site.taken.bench.add(item.clientId);
  const { machine, edge, verdict, projectId } = row;
  draft.happenings.push({
    type: 'bench.checked',
    subject: row.id,
    projectId,
    data: { machine, edge, verdict },
  });
  return [];
}

/** Why a benchmark or a setup cannot say anything about a blade: then no correction is offered either. */
function unfit(benchmark: string, status: string, setup: SiteSetup | null, observedAt: string): string[] {
  const reasons: string[] = [];
  if (status !== 'trusted') reasons.push('benchmark_not_trusted');
  if (!setup) return reasons;
  if (setup.result.marks.some((mark) => mark.name === benchmark)) reasons.push('benchmark_in_fit');
  const fault = forceFault(setup.setup, setup.releases, observedAt);
  if (fault) reasons.push(fault);
  return reasons;
}
