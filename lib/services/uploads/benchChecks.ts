import { benchReading } from '@/lib/compute/grade/benchCheck';
import { toMetres } from '@/lib/compute/units/convert';
import { judgeBench, releasedFor } from '@/lib/services/benchChecks/judge';
import type { CallerContext } from '@/lib/services/context';
import { utcInstant } from '@/lib/services/moments';
import { problemItem } from '@/openapi/problemItem';
import type { ProblemItem } from '@/openapi/schemas/problem';
import type { Document } from './document';
import { type Draft, findSetup, pointerOf } from './draft';

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
  const named = item.layer === undefined ? null : (site.layers.get(item.layer) ?? null);
  if (item.layer !== undefined && !named) {
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
  const layer = named ?? (setup && releasedFor(setup, item.machine, observedAt));
  const { verdict, reasons } = judgeBench(
    reading,
    { name: benchmark.name, elevation: benchmark.elevation, status: benchmark.status },
    { elevations, tolerance, activeOffset, surfaceSha256: item.surfaceSha256, observedAt },
    setup,
    layer,
  );
  const row = {
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
    verdict,
    reasons,
    observedAt,
  };
  draft.benchRows.push({ ...row, layerOffset: layer?.offset ?? null });
  draft.rows.benchChecks.push(row);
  site.taken.bench.add(item.clientId);
  const { machine, edge, projectId } = row;
  draft.happenings.push({
    type: 'bench.checked',
    subject: row.id,
    projectId,
    data: { machine, edge, verdict },
  });
  return [];
}
