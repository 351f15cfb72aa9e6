import type * as z from 'zod';
import { COORDINATE, fixed, signed, unitSign } from '@/app/ui/numbers';
import type { Setup } from '@/openapi/schemas/setup';
import { Grid, LABEL, NorthArrow, roundLength, ScaleBar } from './PlanParts';
import { SetupMark } from './SetupMark';
import { isMarked, type Layout, layoutOf } from './setupLayout';

type Shown = z.output<typeof Setup>;

const SIZE = { width: 640, height: 560 };
/** Room for names beside the outermost marks. */
const EDGE = { x: 128, y: 62 };

/** A setup from above: rays to its marks, the 95 % ellipse and the residuals, both magnified as the caption says. */
export function SetupPlan({ setup }: { setup: Shown }) {
  const layout = layoutOf(setup, SIZE, EDGE);
  const { view, grid, station, targets, north } = layout;
  const unit = unitSign(setup.units.length);
  return (
    <figure className="self-start rounded border border-rule bg-sheet">
      <svg
        viewBox={`0 0 ${SIZE.width} ${SIZE.height}`}
        role="img"
        aria-label={describe(setup)}
        className="block h-auto w-full"
      >
        <Grid view={view} step={grid} size={SIZE} />
        {station
          ? targets.map(({ target, x, y }) => (
              <path
                key={`${target.purpose}${target.target}`}
                d={`M${station.x} ${station.y}L${x} ${y}`}
                stroke={target.used ? 'var(--ink-third)' : 'var(--rule-strong)'}
                strokeDasharray={target.used ? undefined : '5 5'}
              />
            ))
          : null}
        <Station layout={layout} ellipse={setup.errorEllipse} />
        {targets.map((mark) => (
          <SetupMark
            key={`${mark.target.purpose}${mark.target.target}`}
            mark={mark}
            tolerance={setup.tolerance.horizontal}
          />
        ))}
        <NorthArrow at={north} />
        <ScaleBar view={view} length={grid} unit={unit} size={SIZE} />
      </svg>
      <figcaption className="flex justify-between gap-4 border-t border-rule px-3.5 py-2 text-[13.5px] text-ink-second">
        <span>{caption(layout, unit)}</span>
        <span className="whitespace-nowrap">
          grid {roundLength(grid)} {unit}
        </span>
      </figcaption>
    </figure>
  );
}

/** The hub that the instrument stands on, with its name and the ellipse of where it may be. */
function Station({ layout, ellipse }: { layout: Layout; ellipse: Shown['errorEllipse'] }) {
  const { station, magnified, view } = layout;
  if (!station) return null;
  const { x, y, name, label } = station;
  const drawn = view.scale * (magnified ?? 0);
  return (
    <g>
      {magnified ? (
        <ellipse
          cx={x}
          cy={y}
          rx={ellipse.semiMinor * drawn}
          ry={ellipse.semiMajor * drawn}
          transform={`rotate(${ellipse.azimuth} ${x} ${y})`}
          fill="var(--mark-soft)"
          stroke="var(--mark)"
        />
      ) : null}
      <rect
        x={x - 8}
        y={y - 8}
        width="16"
        height="16"
        fill="var(--sheet)"
        stroke="var(--ink)"
        strokeWidth="2.4"
      />
      <circle cx={x} cy={y} r="3" fill="var(--mark)" />
      <text x={label.x} y={label.top + 13} textAnchor={label.anchor} className={LABEL}>
        {name}
      </text>
    </g>
  );
}

function caption({ station, magnified }: Layout, unit: string): string {
  if (!station) return 'The fit did not converge: neither station nor residual arrows are drawn.';
  if (magnified === null) return 'No arrows: the residuals are too large to be drawn beside the site.';
  return `Residuals in ${unit}; their arrows and the 95 % ellipse drawn ${magnified.toLocaleString('en-US')} times larger than the plan`;
}

/** The drawing in words, for whoever does not see it. */
function describe({ station, targets, errorEllipse, units }: Shown): string {
  const unit = unitSign(units.length);
  const marks = targets
    .filter(isMarked)
    .map(({ target, residual: { northing, easting } }) =>
      northing === null || easting === null
        ? `${target}`
        : `${target} east ${signed(easting, COORDINATE)}, north ${signed(northing, COORDINATE)} ${unit}`,
    );
  return `Plan of ${station}. 95 % ellipse ${fixed(errorEllipse.semiMajor, COORDINATE)} by ${fixed(errorEllipse.semiMinor, COORDINATE)} ${unit}. Residuals: ${marks.join('; ')}.`;
}
