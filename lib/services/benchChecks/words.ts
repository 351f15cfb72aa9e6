import { GROSS_ERROR } from '@/lib/compute/grade/benchCheck';
import { offsetFigure } from '@/lib/services/layers/offset';
import type { Lengths } from '@/lib/services/lengths';
import { FORCE_WORDS, type ForceFault } from '@/lib/services/setups/force';
import type { Words } from '@/lib/services/setups/words';

/** What the words of a bench check are made of. */
export interface BenchFacts {
  benchmark: string;
  difference: number;
  tolerance: number;
  layerName: string | null;
  layerOffset: number | null;
  activeOffset: number | null;
}

export type BenchReason =
  | ForceFault
  | 'benchmark_not_trusted'
  | 'benchmark_in_fit'
  | 'readings_unsteady'
  | 'gross_error'
  | 'metres_as_feet'
  | 'feet_as_metres'
  | 'layer_offset_suspected'
  | 'active_offset_suspected'
  | 'offset_differs'
  | 'surface_differs'
  | 'edge_low'
  | 'edge_high';

type Says = (check: BenchFacts, length: Lengths) => Omit<Words, 'code'>;

const always = (text: string, action: string): Says => {
  return () => ({ text, action });
};

const CHECK_MARK = 'Check the benchmark by the setup first.';

const SAYS: Record<Exclude<BenchReason, ForceFault>, Says> = {
  benchmark_not_trusted: always('The benchmark is suspect or quarantined.', 'Bench on a trusted mark.'),
  benchmark_in_fit: always(
    'The benchmark was used in the setup’s own fit: it cannot check it.',
    'Bench on a mark outside the fit.',
  ),
  readings_unsteady: always(
    'The repeats do not agree among themselves.',
    'Rest the edge on the mark and read again.',
  ),
  gross_error: ({ benchmark, difference }, length) => ({
    text: `The edge reads ${readsOff(difference, length)}: a gross error, no blade is off by more than ${length.text(GROSS_ERROR, 1)}.`,
    action: `Check the unit of the readings first, then that the edge stood on ${benchmark}, then the frame that the machine works in.`,
  }),
  metres_as_feet: always(
    'It looks like metres in a foot job.',
    'Send the elevations in the unit that is declared with them.',
  ),
  feet_as_metres: always(
    'It looks like feet in a metre job.',
    'Send the elevations in the unit that is declared with them.',
  ),
  layer_offset_suspected: (check, length) =>
    suspected(check, check.layerOffset, `the offset of ${check.layerName}`, length),
  active_offset_suspected: (check, length) =>
    suspected(check, check.activeOffset, 'the machine’s active offset', length),
  offset_differs: ({ layerName, layerOffset, activeOffset }, length) => {
    const [active, wanted] = [activeOffset ?? 0, layerOffset ?? 0];
    const figure = offsetFigure(wanted, length, active);
    return {
      text: `The machine’s active offset is ${offsetFigure(active, length, wanted)}, that of ${layerName} is ${figure}.`,
      action: `Set ${figure} in the machine before it cuts.`,
    };
  },
  surface_differs: always(
    'The machine’s surface is not the layer’s.',
    'Load the layer’s surface into the machine before it cuts.',
  ),
  edge_low: always('The edge reads low.', CHECK_MARK),
  edge_high: always('The edge reads high.', CHECK_MARK),
};

function suspected({ difference }: BenchFacts, offset: number | null, whose: string, length: Lengths) {
  const figure = offsetFigure(offset ?? 0, length);
  const size = length.text(Math.abs(difference));
  const match = size === length.text(Math.abs(offset ?? 0)) ? 'exactly' : 'within the tolerance';
  return {
    text: `The edge reads ${readsOff(difference, length)}, ${match} ${match === 'exactly' ? '' : 'of '}${whose} (${figure}): is the offset left on (or off)?`,
    action: 'Look at the offset in the machine, and read the edge again with the offset excluded.',
  };
}

function readsOff(difference: number, length: Lengths): string {
  return `${length.text(Math.abs(difference))} ${difference < 0 ? 'low' : 'high'}`;
}

export function wordsOfBenchReason(code: string, check: BenchFacts, length: Lengths): Words {
  const reason = code as BenchReason;
  if (reason in FORCE_WORDS) return FORCE_WORDS[reason as ForceFault];
  return { code, ...SAYS[reason as Exclude<BenchReason, ForceFault>](check, length) };
}
