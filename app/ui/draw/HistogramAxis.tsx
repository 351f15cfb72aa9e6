import { type LengthUnit, stated, unitSign } from '@/app/ui/numbers';

/** Room for the label of a limit, and the least between the middles of two labels. */
const ROOM = 66;
const APART = 42;

interface Tick {
  value: number;
  at: number;
  anchor: 'start' | 'middle' | 'end';
}

interface Props {
  x: (value: number) => number;
  y: number;
  width: number;
  tolerance: { below: number; above: number };
  unit: LengthUnit;
}

/** The line under a histogram of deviations, with the limits on it. */
export function HistogramAxis({ x, y, width, tolerance, unit }: Props) {
  const limits = [...new Set([-tolerance.below || 0, 0, tolerance.above])];
  return (
    <g>
      <path
        d={`M8 ${y}H${width - 8}${limits.map((value) => `M${x(value)} ${y}v5`).join('')}`}
        stroke="var(--ink)"
      />
      {ticks(x, width, tolerance).map(({ value, at, anchor }) => (
        <text key={value} x={at} y={y + 21} textAnchor={anchor} className="fill-ink-second text-[13px]">
          {gradeLabel(value, unit)}
        </text>
      ))}
    </g>
  );
}

/** A deviation as a grade stake carries it: C is cut, F is fill. */
export function gradeLabel(value: number, unit: LengthUnit): string {
  const text = stated(Math.abs(value), unit);
  return Number(text) === 0 ? '0' : `${value > 0 ? 'C' : 'F'} ${text} ${unitSign(unit)}`;
}

/** Where the labels stand: deviations far away draw the band narrow, and no label may cover another. */
function ticks(x: Props['x'], width: number, { below, above }: Props['tolerance']): Tick[] {
  const [low, zero, high] = [x(-below), x(0), x(above)];
  if (high - low < 2 * APART) {
    const end = Math.min(Math.max(low, ROOM), width - 2 * ROOM);
    const start = Math.min(Math.max(high, end + 8), width - ROOM);
    return [
      { value: -below, at: end, anchor: 'end' },
      { value: above, at: start, anchor: 'start' },
    ];
  }
  const limits: Tick[] = [
    { value: -below, at: low, anchor: 'middle' },
    { value: above, at: high, anchor: 'middle' },
  ];
  const free = zero - low >= APART && high - zero >= APART;
  return free ? [...limits, { value: 0, at: zero, anchor: 'middle' }] : limits;
}
