import { unitSign } from '@/app/ui/numbers';
import { DeviationMark } from './DeviationMark';
import { type GradeShot, isOutside } from './deviation';
import { Grid, NorthArrow, northPlace, roundLength, ScaleBar } from './PlanParts';
import { fitView, roundStep } from './scale';

const SIZE = { width: 660, height: 440 };
const EDGE = { x: 48, y: 48 };
/** How near a press must be to a check, in pixels of the drawing. */
const REACH = 18;

/** Grade checks from above. A press chooses the nearest one; the table beside does the same for the keyboard. */
export function DeviationPlan({
  checks,
  chosen,
  choose,
}: {
  checks: readonly GradeShot[];
  chosen: string | null;
  choose: (id: string) => void;
}) {
  const view = fitView(
    checks.map(({ point }) => point),
    SIZE.width,
    SIZE.height,
    EDGE,
  );
  const unit = unitSign(checks[0].units.length);
  const grid = roundStep(SIZE.width / 4 / view.scale);
  const boxes = checks.map(({ point }) => ({
    x: view.x(point.easting) - 8,
    y: view.y(point.northing) - 8,
    width: 16,
    height: 16,
  }));
  const high = checks.filter(({ deviation }) => (deviation ?? 0) > 0).length;
  const outside = checks.filter(isOutside).length;

  function press(event: React.PointerEvent<SVGSVGElement>) {
    const box = event.currentTarget.getBoundingClientRect();
    const x = ((event.clientX - box.left) / box.width) * SIZE.width;
    const y = ((event.clientY - box.top) / box.height) * SIZE.height;
    const distance = ({ point }: GradeShot) =>
      Math.hypot(view.x(point.easting) - x, view.y(point.northing) - y);
    const nearest = checks.reduce((best, check) => (distance(check) < distance(best) ? check : best));
    if (distance(nearest) <= REACH) choose(nearest.id);
  }

  return (
    <figure className="self-start rounded border border-rule bg-sheet">
      <svg
        viewBox={`0 0 ${SIZE.width} ${SIZE.height}`}
        role="img"
        aria-label={`Plan of ${checks.length} checks: ${high} high, ${checks.length - high} low or even, ${outside} outside the tolerance. Each is in the table.`}
        onPointerDown={press}
        className="block h-auto w-full cursor-crosshair"
      >
        <Grid view={view} step={grid} size={SIZE} />
        {checks.map((check) => (
          <g key={check.id}>
            {check.id === chosen ? (
              <circle
                cx={view.x(check.point.easting)}
                cy={view.y(check.point.northing)}
                r="13"
                fill="var(--mark-soft)"
                stroke="var(--mark)"
                strokeWidth="2"
              />
            ) : null}
            <DeviationMark
              x={view.x(check.point.easting)}
              y={view.y(check.point.northing)}
              high={(check.deviation ?? 0) > 0}
              outside={isOutside(check)}
            />
          </g>
        ))}
        <NorthArrow at={northPlace({ boxes, segments: [] }, SIZE)} />
        <ScaleBar view={view} length={grid} unit={unit} size={SIZE} />
      </svg>
      <figcaption className="flex flex-wrap justify-between gap-x-4 border-t border-rule px-3.5 py-2 text-[13.5px] text-ink-second">
        <span className="inline-flex flex-wrap items-center gap-x-4">
          <Key high>high, cut</Key>
          <Key high={false}>low, fill</Key>
          <span>solid where outside the tolerance</span>
        </span>
        <span className="whitespace-nowrap">
          grid {roundLength(grid)} {unit}
        </span>
      </figcaption>
    </figure>
  );
}

function Key({ high, children }: { high: boolean; children: string }) {
  return (
    <span className="inline-flex items-center gap-1.5">
      <svg viewBox="0 0 14 14" width="14" height="14" aria-hidden="true">
        <DeviationMark x={7} y={7} high={high} outside={false} />
      </svg>
      {children}
    </span>
  );
}
