import type { ControlState } from '@/app/ui/controlState';
import { unitSign } from '@/app/ui/numbers';
import { placeLabels } from './labels';
import {
  Grid,
  LABEL,
  LETTER,
  NorthArrow,
  northPlace,
  roundLength,
  ScaleBar,
  SMALL,
  scaleRoom,
} from './PlanParts';
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
  const points = marks.map((mark) => ({ x: view.x(mark.easting), y: view.y(mark.northing) }));
  const boxes = [
    ...points.map(({ x, y }) => ({ x: x - 11, y: y - 12, width: 22, height: 22 })),
    scaleRoom(grid * view.scale, SIZE),
  ];
  const north = northPlace({ boxes, segments: [] }, SIZE);
  const places = placeLabels(
    marks.map(({ name, status }, i) => ({
      ...points[i],
      gap: 13,
      width: Math.max(name.length, status === 'trusted' ? 0 : status.length) * LETTER,
      height: status === 'trusted' ? 17 : 30,
    })),
    { boxes: [...boxes, north], segments: [] },
    SIZE,
  );
  return (
    <figure className="rounded border border-rule bg-sheet">
      <svg
        viewBox={`0 0 ${SIZE.width} ${SIZE.height}`}
        role="img"
        aria-label={`Plan of ${marks.length} control points. Each is in the table.`}
        className="block h-auto w-full"
      >
        <Grid view={view} step={grid} size={SIZE} />
        {marks.map((mark, i) => {
          const { x, y } = points[i];
          const { x: hang, top, anchor } = places[i];
          const colour = COLOUR[mark.status];
          return (
            <g key={mark.name}>
              <path d={`M${x} ${y - 8}l7 12h-14Z`} fill="var(--sheet)" stroke={colour} strokeWidth="1.8" />
              {mark.status === 'trusted' ? (
                <circle cx={x} cy={y} r="1.6" fill={colour} />
              ) : (
                <path d={`M${x - 11} ${y + 8}L${x + 11} ${y - 12}`} stroke={colour} strokeWidth="1.8" />
              )}
              <text x={hang} y={top + 13} textAnchor={anchor} className={LABEL}>
                {mark.name}
              </text>
              {mark.status === 'trusted' ? null : (
                <text
                  x={hang}
                  y={top + 28}
                  textAnchor={anchor}
                  fill={colour}
                  className={`font-medium ${SMALL}`}
                >
                  {mark.status}
                </text>
              )}
            </g>
          );
        })}
        <NorthArrow at={north} />
        <ScaleBar view={view} length={grid} unit={unit} size={SIZE} />
      </svg>
      <figcaption className="border-t border-rule px-3.5 py-2 text-right text-[13.5px] text-ink-second">
        grid {roundLength(grid)} {unit}
      </figcaption>
    </figure>
  );
}
