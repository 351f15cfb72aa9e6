import { COORDINATE, fixed, moment, signed } from '@/app/ui/numbers';
import { SMALL } from './PlanParts';
import { roundStep } from './scale';

interface Row {
  setupId: string;
  station: string;
  observedAt: string;
  residual: { easting: number | null; northing: number | null; elevation: number | null };
}

const WIDTH = 660;
/** A lane: its name, and the room on either side of its line. */
const NAME = 28;
const ARM = 36;
const LANE = NAME + 2 * ARM;
const LEFT = 96;
const LANES = [
  { name: 'Easting', pick: (row: Row) => row.residual.easting },
  { name: 'Northing', pick: (row: Row) => row.residual.northing },
  { name: 'Elevation', pick: (row: Row) => row.residual.elevation },
] as const;
/** A setup this many times larger than the middle one does not set the scale. */
const GROSS = 6;

/** What a point showed, setup by setup, oldest at the left: a lane an axis, all in one scale. */
export function ResidualHistory({ residuals, unit }: { residuals: readonly Row[]; unit: string }) {
  const rows = [...residuals].sort((a, b) => a.observedAt.localeCompare(b.observedAt));
  const sizes = rows.map((row) => Math.max(...LANES.map(({ pick }) => Math.abs(pick(row) ?? 0))));
  const usual = largestUsual(sizes);
  const tick = roundStep(usual);
  const reach = usual * 1.15;
  const beyond = sizes.some((size) => size > reach);
  const x = (i: number) => LEFT + 24 + ((i + 0.5) / rows.length) * (WIDTH - LEFT - 40);
  const foot = LANES.length * LANE + 30;
  return (
    <figure className="rounded border border-rule bg-sheet">
      <svg
        viewBox={`0 0 ${WIDTH} ${foot + 10}`}
        role="img"
        aria-label={`Residuals of ${rows.length} setups, largest ${fixed(Math.max(...sizes), COORDINATE)} ${unit}. Each is in the table.`}
        className="block h-auto w-full"
      >
        {LANES.map(({ name, pick }, lane) => {
          const middle = lane * LANE + NAME + ARM;
          const y = (value: number) => middle - (value / reach) * (ARM - 4);
          return (
            <g key={name}>
              <text x="16" y={middle - ARM - 4} className={`fill-ink-second font-medium ${SMALL}`}>
                {name}
              </text>
              {[tick, -tick].map((value) => (
                <g key={value}>
                  <path d={`M${LEFT} ${y(value)}H${WIDTH - 16}`} stroke="var(--rule)" />
                  <text x={LEFT - 8} y={y(value) + 4} textAnchor="end" className={`fill-ink-third ${SMALL}`}>
                    {signed(value, COORDINATE)}
                  </text>
                </g>
              ))}
              <path d={`M${LEFT} ${middle}H${WIDTH - 16}`} stroke="var(--rule-strong)" />
              {rows.map((row, i) => {
                const value = pick(row);
                if (value === null) return null;
                return <Bar key={row.setupId} x={x(i)} from={middle} to={y(value)} most={ARM - 2} />;
              })}
            </g>
          );
        })}
        <text x={LEFT} y={foot} className={`fill-ink-third ${SMALL}`}>
          {moment(rows[0].observedAt)}
        </text>
        <text x={WIDTH - 16} y={foot} textAnchor="end" className={`fill-ink-third ${SMALL}`}>
          {rows.length > 1 ? moment(rows[rows.length - 1].observedAt) : ''}
        </text>
      </svg>
      {beyond ? (
        <figcaption className="border-t border-rule px-3.5 py-2 text-[13.5px] text-ink-second">
          Arrowheads lie beyond the scale; their figures are in the table.
        </figcaption>
      ) : null}
    </figure>
  );
}

/** From the line to the value; where that lies beyond the lane, an arrowhead at its edge. */
function Bar({ x, from, to, most }: { x: number; from: number; to: number; most: number }) {
  const side = Math.sign(to - from);
  if (Math.abs(to - from) <= most)
    return <path d={`M${x} ${from}V${to}m-5 0h10`} stroke="var(--mark)" strokeWidth="2.2" fill="none" />;
  const end = from + side * most;
  return (
    <g fill="var(--mark)">
      <path d={`M${x} ${from}V${end - side * 8}`} stroke="var(--mark)" strokeWidth="2.2" />
      <path d={`M${x} ${end}l-6 ${-side * 10}h12Z`} />
    </g>
  );
}

/** The largest size that is not gross beside the middle one, so that one blunder does not flatten the rest. */
export function largestUsual(sizes: readonly number[]): number {
  const least = 10 ** -COORDINATE;
  const sorted = [...sizes].sort((a, b) => a - b);
  const middle = Math.max(sorted[Math.floor((sorted.length - 1) / 2)] ?? 0, least);
  return Math.max(least, ...sorted.filter((size) => size <= GROSS * middle));
}
