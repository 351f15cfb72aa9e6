import type { ControlState } from '@/app/ui/controlState';
import { unitSign } from '@/app/ui/numbers';
import { Grid, LABEL, NorthArrow, roundLength, ScaleBar, SMALL } from './PlanParts';
import { fitView, roundStep } from './scale';

interface Mark {
  name: string;
  easting: number;
  northing: number;
  status: ControlState;
  units: { length: 'm' | 'ft' | 'ftUS' };
}

const SIZE = { width: 660, height: 380 };
const EDGE = { x: 96, y: 48 };
const COLOUR = { trusted: 'var(--ink)', suspect: 'var(--hold)', quarantined: 'var(--fail)' } as const;

/** The control of a site from above; what is not trusted says so. */
export function ControlPlan({ marks }: { marks: readonly Mark[] }) {
  const view = fitView(marks, SIZE.width, SIZE.height, EDGE);
  const grid = roundStep(SIZE.width / 4 / view.scale);
  const unit = unitSign(marks[0].units.length);
  return (
    <figure className="rounded border border-rule bg-sheet">
      <svg
        viewBox={`0 0 ${SIZE.width} ${SIZE.height}`}
        role="img"
        aria-label={`Plan of ${marks.length} control points. Each is in the table.`}
        className="block h-auto w-full"
      >
        <Grid view={view} step={grid} size={SIZE} />
        {marks.map((mark) => {
          const [x, y] = [view.x(mark.easting), view.y(mark.northing)];
          const colour = COLOUR[mark.status];
          const right = x < SIZE.width - 130;
          const place = {
            x: right ? x + 13 : x - 13,
            textAnchor: right ? ('start' as const) : ('end' as const),
          };
          return (
            <g key={mark.name}>
              <path d={`M${x} ${y - 8}l7 12h-14Z`} fill="var(--sheet)" stroke={colour} strokeWidth="1.8" />
              {mark.status === 'trusted' ? (
                <circle cx={x} cy={y} r="1.6" fill={colour} />
              ) : (
                <path d={`M${x - 11} ${y + 8}L${x + 11} ${y - 12}`} stroke={colour} strokeWidth="1.8" />
              )}
              <text {...place} y={y + 1} className={LABEL}>
                {mark.name}
              </text>
              {mark.status === 'trusted' ? null : (
                <text {...place} y={y + 15} fill={colour} className={`font-medium ${SMALL}`}>
                  {mark.status}
                </text>
              )}
            </g>
          );
        })}
        <NorthArrow view={view} marks={marks} size={SIZE} />
        <ScaleBar view={view} length={grid} unit={unit} size={SIZE} />
      </svg>
      <figcaption className="border-t border-rule px-3.5 py-2 text-right text-[13.5px] text-ink-second">
        grid {roundLength(grid)} {unit}
      </figcaption>
    </figure>
  );
}
