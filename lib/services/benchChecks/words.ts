import type { Lengths } from '@/lib/services/lengths';
import { FORCE_WORDS } from '@/lib/services/setups/force';
import type { Words } from '@/lib/services/setups/words';

const BENCH_REASONS: Record<string, Words> = {
  ...FORCE_WORDS,
  benchmark_not_trusted: {
    code: 'benchmark_not_trusted',
    text: 'The benchmark is suspect or quarantined.',
    action: 'Bench on a trusted mark.',
  },
  benchmark_in_fit: {
    code: 'benchmark_in_fit',
    text: 'The benchmark was used in the setup’s own fit: it cannot check it.',
    action: 'Bench on a mark outside the fit.',
  },
  offset_differs: {
    code: 'offset_differs',
    text: 'The machine’s active offset is not the layer’s.',
    action: 'Set the layer’s offset in the machine before it cuts.',
  },
  surface_differs: {
    code: 'surface_differs',
    text: 'The machine’s surface is not the layer’s.',
    action: 'Load the layer’s surface into the machine before it cuts.',
  },
  readings_unsteady: {
    code: 'readings_unsteady',
    text: 'The repeats do not agree among themselves.',
    action: 'Rest the edge on the mark and read again.',
  },
  edge_low: {
    code: 'edge_low',
    text: 'The edge reads low.',
    action: 'Check the benchmark by the setup first.',
  },
  edge_high: {
    code: 'edge_high',
    text: 'The edge reads high.',
    action: 'Check the benchmark by the setup first.',
  },
};

export function wordsOfBenchReason(code: string): Words {
  return BENCH_REASONS[code];
}

/** These leave nothing to judge a blade by. */
const UNFIT = new Set([
  'setup_not_in_force',
  'setup_superseded',
  'setup_failed_since',
  'benchmark_not_trusted',
  'benchmark_in_fit',
  'readings_unsteady',
]);

function isUnfit(reasons: readonly string[]): boolean {
  return reasons.some((code) => UNFIT.has(code));
}

/** A correction is offered for an edge that is off by more than the tolerance, where the check itself is sound. */
export function offersCorrection(reasons: readonly string[]): boolean {
  return reasons.some((code) => code === 'edge_low' || code === 'edge_high') && !isUnfit(reasons);
}

const EDGE = { left: 'Left edge', right: 'Right edge', centre: 'Centre of the edge' } as const;

/** What to do with a blade, in words that leave no sign open. */
export function benchInstruction(
  check: {
    edge: 'left' | 'right' | 'centre';
    benchmark: string;
    difference: number;
    reasons: readonly string[];
  },
  length: Lengths,
): string {
  const edge = EDGE[check.edge];
  const size = length.text(Math.abs(check.difference));
  if (isUnfit(check.reasons)) {
    const words = check.reasons.map(wordsOfBenchReason);
    return `Do not correct. ${words.map(({ text, action }) => `${text} ${action ?? ''}`.trim()).join(' ')}`;
  }
  const others = check.reasons.filter((code) => code === 'offset_differs' || code === 'surface_differs');
  const warning = others
    .map((code) => ` ${wordsOfBenchReason(code).text} ${wordsOfBenchReason(code).action}`)
    .join('');
  if (!offersCorrection(check.reasons))
    return `${edge} agrees with ${check.benchmark} within the tolerance (${size}).${warning}`;
  const low = check.difference < 0;
  const reads = low ? 'low' : 'high';
  const ground = low ? 'high' : 'low';
  const act = low ? `add ${size} to` : `take ${size} off`;
  return `${edge} reads ${size} ${reads}: it would leave ground ${size} ${ground}. First check ${check.benchmark} by the setup. Only if the setup agrees, ${act} the ${edge.toLowerCase()}'s height, then bench again.${warning}`;
}
