import { type BenchReading, benchMixUp, isGross, isOffByOffset } from '@/lib/compute/grade/benchCheck';
import type { UnitMixUp } from '@/lib/compute/units/mixUp';
import { isSameOffset } from '@/lib/services/layers/offset';
import { CLOCK_SLACK_MS, forceFault } from '@/lib/services/setups/force';
import type { SiteSetup } from '@/lib/services/uploads/site';
import type { BenchReason } from './words';

interface Benchmark {
  name: string;
  elevation: number;
  status: string;
}

interface Shown {
  elevations: readonly number[];
  tolerance: number;
  activeOffset: number | null;
  surfaceSha256: string | undefined;
  observedAt: string;
}

interface CutLayer {
  offset: number;
  surfaceSha256: string | null;
}

/** What a reading of a blade says, and why: first what it cannot be judged by, then what explains it, then the edge. */
export function judgeBench(
  reading: BenchReading,
  benchmark: Benchmark,
  shown: Shown,
  setup: SiteSetup | null,
  layer: CutLayer | null,
): { verdict: BenchReading['verdict']; reasons: BenchReason[] } {
  const faults = faultsOf(reading, benchmark, setup, shown.observedAt);
  const causes = causesOf(reading, benchmark.elevation, shown, layer?.offset ?? null);
  const settings = layer ? settingsOf(shown, layer) : [];
  // A gross error is one whatever else is amiss.
  if (causes.includes('gross_error')) {
    return { verdict: 'fail', reasons: [...faults, ...causes, ...settings] };
  }
  const off: BenchReason[] =
    reading.verdict === 'fail' ? [reading.difference < 0 ? 'edge_low' : 'edge_high'] : [];
  const reasons = [...faults, ...causes, ...settings, ...off];
  if (faults.length > 0) return { verdict: 'hold', reasons };
  const verdict = reading.verdict === 'pass' && settings.length > 0 ? 'hold' : reading.verdict;
  return { verdict, reasons };
}

/** Why a check cannot say anything about a blade: then no correction is offered either. */
function faultsOf(
  { unsteady }: BenchReading,
  { name, status }: Benchmark,
  setup: SiteSetup | null,
  observedAt: string,
): BenchReason[] {
  const reasons: BenchReason[] = [];
  if (status !== 'trusted') reasons.push('benchmark_not_trusted');
  if (setup?.result.marks.some((mark) => mark.name === name)) reasons.push('benchmark_in_fit');
  const fault = setup && forceFault(setup.setup, setup.releases, observedAt);
  if (fault) reasons.push(fault);
  if (unsteady) reasons.push('readings_unsteady');
  return reasons;
}

const MIX_UPS: Record<Exclude<UnitMixUp, 'otherFoot'>, BenchReason> = {
  metresAsFeet: 'metres_as_feet',
  feetAsMetres: 'feet_as_metres',
};

/** What an edge that is off looks like before anybody thinks of the blade: an offset, or a gross error. */
function causesOf(
  { verdict, difference, read }: BenchReading,
  known: number,
  { elevations, tolerance, activeOffset }: Shown,
  layerOffset: number | null,
): BenchReason[] {
  if (verdict === 'fail' && isOffByOffset(difference, layerOffset, tolerance))
    return ['layer_offset_suspected'];
  if (verdict === 'fail' && isOffByOffset(difference, activeOffset, tolerance))
    return ['active_offset_suspected'];
  if (verdict === 'pass' || !isGross(known, elevations)) return [];
  const mixUp = benchMixUp(read, known);
  return mixUp === null || mixUp === 'otherFoot' ? ['gross_error'] : ['gross_error', MIX_UPS[mixUp]];
}

/** What in the machine is not the layer's. */
function settingsOf({ activeOffset, surfaceSha256 }: Shown, layer: CutLayer): BenchReason[] {
  const reasons: BenchReason[] = [];
  if (activeOffset !== null && !isSameOffset(activeOffset, layer.offset)) reasons.push('offset_differs');
  if (surfaceSha256 !== undefined && surfaceSha256 !== layer.surfaceSha256) reasons.push('surface_differs');
  return reasons;
}

/** The layer that a setup was last released to a machine for, as it was bound then. */
export function releasedFor({ releases }: SiteSetup, machine: string, observedAt: string) {
  const latest = new Date(observedAt).getTime() + CLOCK_SLACK_MS;
  const release = releases.findLast(
    (turn) =>
      turn.action === 'release' && turn.machine === machine && new Date(turn.effectiveAt).getTime() <= latest,
  );
  if (!release || release.layerName === null || release.offset === null) return null;
  const { layerName, layerVersion, offset, surfaceSha256 } = release;
  return { name: layerName, version: layerVersion, offset, surfaceSha256 };
}
