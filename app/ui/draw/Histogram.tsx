import type { LengthUnit } from '@/app/ui/numbers';
import { gradeLabel, HistogramAxis } from './HistogramAxis';
import { roundStep } from './scale';

const WIDTH = 420;
const HEIGHT = 220;
const BASE = 184;
const TOP = 28;

export interface Bin {
  from: number;
  to: number;
  count: number;
}

/** Counts values into bins of a round width that begin at multiples of it. */
export function binned(values: readonly number[], width: number): Bin[] {
  const index = (value: number) => Math.floor(value / width + 1e-9);
  const first = Math.min(...values.map(index));
  const last = Math.max(...values.map(index));
  const bins = Array.from({ length: last - first + 1 }, (_, i) => ({
    from: (first + i) * width,
    to: (first + i + 1) * width,
    count: 0,
  }));
  for (const value of values) bins[index(value) - first].count++;
  return bins;
}

/** Deviations against the band of the tolerance; what lies outside of it is in the colours of cut and fill. */
export function Histogram({
  values,
  tolerance,
  unit,
}: {
  values: readonly number[];
  tolerance: { below: number; above: number };
  unit: LengthUnit;
}) {
  const span = tolerance.below + tolerance.above;
  const reach = Math.max(...values, tolerance.above, ...values.map((v) => -v), tolerance.below);
  const bins = binned(values, roundStep(Math.max(span / 8, reach / 24)));
  const low = Math.min(bins[0].from, -tolerance.below) - span * 0.1;
  const high = Math.max(bins[bins.length - 1].to, tolerance.above) + span * 0.1;
  const x = (value: number) => 12 + ((value - low) / (high - low)) * (WIDTH - 24);
  const most = Math.max(...bins.map((bin) => bin.count));
  const y = (count: number) => BASE - (count / most) * (BASE - TOP - 10);
  return (
    <svg
      viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
      role="img"
      aria-label={`Distribution of ${values.length} deviations, from ${gradeLabel(bins[0].from, unit)} to ${gradeLabel(bins[bins.length - 1].to, unit)}; most lie about ${gradeLabel(mode(bins), unit)}.`}
      className="block h-auto w-full rounded border border-rule bg-sheet"
    >
      <rect
        x={x(-tolerance.below)}
        y={TOP - 12}
        width={x(tolerance.above) - x(-tolerance.below)}
        height={BASE - TOP + 12}
        fill="var(--rule)"
      />
      {bins.map(({ from, to, count }) => (
        <rect
          key={from}
          x={x(from) + 0.75}
          y={y(count)}
          width={Math.max(1, x(to) - x(from) - 1.5)}
          height={BASE - y(count)}
          fill={colour((from + to) / 2, tolerance)}
        />
      ))}
      <HistogramAxis x={x} y={BASE} width={WIDTH} tolerance={tolerance} unit={unit} />
    </svg>
  );
}

function colour(middle: number, tolerance: { below: number; above: number }): string {
  if (middle > tolerance.above) return 'var(--cut)';
  return middle < -tolerance.below ? 'var(--fill)' : 'var(--ink-second)';
}

function mode(bins: readonly Bin[]): number {
  const { from, to } = bins.reduce((best, bin) => (bin.count > best.count ? bin : best));
  return (from + to) / 2;
}
