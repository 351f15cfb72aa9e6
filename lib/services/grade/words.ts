import type { Lengths } from '@/lib/services/lengths';
import type { Words } from '@/lib/services/setups/words';

/** Reasons that a setup gives, shared by grade and bench checks. */
const SETUP_REASONS: Record<string, Words> = {
  setup_not_in_force: {
    code: 'setup_not_in_force',
    text: 'The setup was not in force then: not released, run out or withdrawn.',
    action: 'Have the setup released, then shoot again.',
  },
  setup_superseded: {
    code: 'setup_superseded',
    text: 'The setup was refitted since.',
    action: 'Name the refit, and shoot again.',
  },
  setup_failed_since: {
    code: 'setup_failed_since',
    text: 'A check has found the setup wrong.',
    action: 'Set up anew, then shoot again.',
  },
};

const GRADE_REASONS: Record<string, Words> = {
  ...SETUP_REASONS,
  outside_surface: {
    code: 'outside_surface',
    text: 'The point lies outside the design surface.',
    action: 'Check the point and the layer’s surface.',
  },
  too_close_to_call: {
    code: 'too_close_to_call',
    text: 'Too close to the limit to call with this uncertainty.',
    action: 'Shoot again from nearer by or in both faces.',
  },
  method_not_capable: {
    code: 'method_not_capable',
    text: 'With this uncertainty no reading could prove the tolerance.',
    action: 'Use a better method for this tolerance.',
  },
  judged_as_read: {
    code: 'judged_as_read',
    text: 'No uncertainty was stated: the reading was judged as read.',
    action: 'Send sigma with the point, or set the project’s positionSigma.',
  },
  ground_high: { code: 'ground_high', text: 'Ground is above the tolerance.', action: 'Cut.' },
  ground_low: { code: 'ground_low', text: 'Ground is below the tolerance.', action: 'Fill.' },
};

export function wordsOfGradeReason(code: string): Words {
  return GRADE_REASONS[code];
}

const BENCH_REASONS: Record<string, Words> = {
  ...SETUP_REASONS,
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

/** These leave nothing to correct by. */
const NO_CORRECTION = new Set([
  'setup_not_in_force',
  'setup_superseded',
  'setup_failed_since',
  'benchmark_not_trusted',
  'benchmark_in_fit',
  'readings_unsteady',
]);

export function offersCorrection(reasons: readonly string[]): boolean {
  return !reasons.some((code) => NO_CORRECTION.has(code));
}

const EDGE = { left: 'Left edge', right: 'Right edge', centre: 'Centre of the edge' } as const;

/** What to do with a blade, in words that leave no sign open. */
export function benchInstruction(
  check: {
    edge: 'left' | 'right' | 'centre';
    benchmark: string;
    difference: number;
    verdict: 'pass' | 'hold' | 'fail';
    reasons: readonly string[];
  },
  length: Lengths,
): string {
  const edge = EDGE[check.edge];
  const size = length.text(Math.abs(check.difference));
  if (!offersCorrection(check.reasons)) {
    const words = check.reasons.map(wordsOfBenchReason);
    return `Do not correct. ${words.map(({ text, action }) => `${text} ${action ?? ''}`.trim()).join(' ')}`;
  }
  const others = check.reasons.filter((code) => code === 'offset_differs' || code === 'surface_differs');
  const warning = others
    .map((code) => ` ${wordsOfBenchReason(code).text} ${wordsOfBenchReason(code).action}`)
    .join('');
  const within =
    check.verdict === 'pass' || (others.length > 0 && !check.reasons.some((c) => c.startsWith('edge_')));
  if (within) return `${edge} agrees with ${check.benchmark} within the tolerance (${size}).${warning}`;
  const low = check.difference < 0;
  const reads = low ? 'low' : 'high';
  const ground = low ? 'high' : 'low';
  const act = low ? `add ${size} to` : `take ${size} off`;
  return `${edge} reads ${size} ${reads}: it would leave ground ${size} ${ground}. First check ${check.benchmark} by the setup. Only if the setup agrees, ${act} the ${edge.toLowerCase()}'s height, then bench again.${warning}`;
}
