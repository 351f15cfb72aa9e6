import type { Lengths } from '@/lib/services/lengths';
import { type BenchFacts, type BenchReason, wordsOfBenchReason } from './words';

/** These leave nothing to correct a blade by. */
const NO_CORRECTION: ReadonlySet<string> = new Set<BenchReason>([
  'setup_not_in_force',
  'setup_superseded',
  'setup_failed_since',
  'benchmark_not_trusted',
  'benchmark_in_fit',
  'readings_unsteady',
  'gross_error',
  'layer_offset_suspected',
  'active_offset_suspected',
]);

/** A correction is offered for an edge that is off by more than the tolerance, where nothing else explains that. */
export function offersCorrection(reasons: readonly string[]): boolean {
  const isOff = reasons.some((code) => code === 'edge_low' || code === 'edge_high');
  return isOff && !reasons.some((code) => NO_CORRECTION.has(code));
}

const EDGE = { left: 'Left edge', right: 'Right edge', centre: 'Centre of the edge' } as const;

/** What to do with a blade, in words that leave no sign open. */
export function benchInstruction(
  check: BenchFacts & { edge: 'left' | 'right' | 'centre'; reasons: readonly string[] },
  length: Lengths,
): string {
  const { benchmark, difference, reasons } = check;
  const say = (codes: readonly string[]) => {
    const words = codes.map((code) => wordsOfBenchReason(code, check, length));
    const sentences = [...words.map(({ text }) => text), ...words.map(({ action }) => action)];
    return sentences.map((sentence) => (sentence ? ` ${sentence}` : '')).join('');
  };
  if (reasons.some((code) => NO_CORRECTION.has(code))) {
    const isOff = (code: string) => code === 'edge_low' || code === 'edge_high';
    return `Do not correct.${say(reasons.filter((code) => !isOff(code)))}`;
  }
  const warning = say(reasons.filter((code) => code === 'offset_differs' || code === 'surface_differs'));
  const edge = EDGE[check.edge];
  const size = length.text(Math.abs(difference));
  if (!offersCorrection(reasons))
    return `${edge} agrees with ${benchmark} within the tolerance (${size}).${warning}`;
  const low = difference < 0;
  const reads = low ? 'low' : 'high';
  const ground = low ? 'high' : 'low';
  const act = low ? `add ${size} to` : `take ${size} off`;
  return `${edge} reads ${size} ${reads}: it would leave ground ${size} ${ground}. First check ${benchmark} by the setup. Only if the setup agrees, ${act} the ${edge.toLowerCase()}'s height, then bench again.${warning}`;
}
