import { COORDINATE, fixed, moment, signed } from '@/app/ui/numbers';
import { roundStep } from './scale';

interface Row {
  setupId: string;
  station: string;
  observedAt: string;
  residual: { easting: number | null; northing: number | null; elevation: number | null };
}

const WIDTH = 660;
const LANE = 74;
const LEFT = 96;
const LANES = [
  { name: 'Northing', pick: (row: Row) => row.residual.northing },
  { name: 'Easting', pick: (row: Row) => row.residual.easting },
  { name: 'Elevation', pick: (row: Row) => row.residual.elevation },
] as const;

/** What a point showed, setup by setup, oldest at the left: a lane an axis, all in one scale. */
export function ResidualHistory({ residuals, unit }: { residuals: readonly Row[]; unit: string }) {
  const rows = [...residuals].sort((a, b) => a.observedAt.localeCompare(b.observedAt));
  const sizes = rows.flatMap((row) => LANES.map(({ pick }) => Math.abs(pick(row) ?? 0)));
  const tick = roundStep(Math.max(...sizes, 1e-4));
  const reach = Math.max(...sizes, tick) * 1.15;
  const x = (i: number) => LEFT + 24 + ((i + 0.5) / rows.length) * (WIDTH - LEFT - 40);
  return (
    <svg
      viewBox={`0 0 ${WIDTH} ${LANES.length * LANE + 30}`}
      role="img"
      aria-label={`Residuals of ${rows.length} setups, largest ${fixed(Math.max(...sizes), COORDINATE)} ${unit}. Each is in the table.`}
      className="block h-auto w-full rounded border border-rule bg-sheet"
    >
      {LANES.map(({ name, pick }, lane) => {
        const middle = lane * LANE + LANE / 2 + 8;
        const y = (value: number) => middle - (value / reach) * (LANE / 2 - 6);
        return (
          <g key={name}>
            <text x="16" y={middle + 4} className="fill-ink-second text-[13px]">
              {name}
            </text>
            {[tick, -tick].map((value) => (
              <g key={value}>
                <path d={`M${LEFT} ${y(value)}H${WIDTH - 16}`} stroke="var(--rule)" />
                <text x={LEFT + 2} y={y(value) - 3} className="fill-ink-third text-[11px]">
                  {signed(value, 3)}
                </text>
              </g>
            ))}
            <path d={`M${LEFT} ${middle}H${WIDTH - 16}`} stroke="var(--rule-strong)" />
            {rows.map((row, i) => {
              const value = pick(row);
              return value === null ? null : (
                <path
                  key={row.setupId}
                  d={`M${x(i)} ${middle}V${y(value)}m-5 0h10`}
                  stroke="var(--mark)"
                  strokeWidth="2.2"
                  fill="none"
                />
              );
            })}
          </g>
        );
      })}
      <text x={LEFT + 24} y={LANES.length * LANE + 22} className="fill-ink-third text-[12px]">
        {moment(rows[0].observedAt)}
      </text>
      <text
        x={WIDTH - 16}
        y={LANES.length * LANE + 22}
        textAnchor="end"
        className="fill-ink-third text-[12px]"
      >
        {rows.length > 1 ? moment(rows[rows.length - 1].observedAt) : ''}
      </text>
    </svg>
  );
}
