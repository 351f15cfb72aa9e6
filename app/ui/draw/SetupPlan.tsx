import type * as z from 'zod';
import { COORDINATE, fixed, signed, unitSign } from '@/app/ui/numbers';
import type { Setup } from '@/openapi/schemas/setup';
import { Grid, LABEL, NorthArrow, roundLength, ScaleBar } from './PlanParts';
import { fitView, roundStep, type View } from './scale';

type Shown = z.output<typeof Setup>;

const WIDTH = 640;
const HEIGHT = 560;
const SIZE = { width: WIDTH, height: HEIGHT };
/** Room for names beside the outermost marks. */
const EDGE = { x: 128, y: 62 };
/** The longest residual arrow or half axis, in pixels. */
const LONGEST = 46;

/** A setup from above: rays to its marks, the 95 % ellipse and the residuals, both magnified as the caption says. */
export function SetupPlan({ setup }: { setup: Shown }) {
  const { position, errorEllipse, units } = setup;
  const marks = setup.targets.filter((target) => target.purpose === 'orient');
  const checks = setup.targets.filter((target) => target.purpose !== 'orient');
  const all = [...marks, ...checks];
  const view = fitView([position, ...all.map((mark) => mark.published)], WIDTH, HEIGHT, EDGE);
  const sizes = all.map(({ residual: r }) => Math.hypot(r.easting ?? 0, r.northing ?? 0));
  const largest = Math.max(errorEllipse.semiMajor, ...sizes, 1e-9);
  const magnified = Math.max(1, roundStep(LONGEST / (largest * view.scale)));
  const unit = unitSign(units.length);
  const grid = roundStep(WIDTH / 4 / view.scale);
  const [sx, sy] = [view.x(position.easting), view.y(position.northing)];
  const drawn = view.scale * magnified;
  return (
    <figure className="self-start rounded border border-rule bg-sheet">
      <svg
        viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
        role="img"
        aria-label={describe(setup)}
        className="block h-auto w-full"
      >
        <Grid view={view} step={grid} size={SIZE} />
        {all.map((mark) => (
          <path
            key={`${mark.purpose}${mark.target}`}
            d={`M${sx} ${sy}L${view.x(mark.published.easting)} ${view.y(mark.published.northing)}`}
            stroke={mark.used ? 'var(--ink-third)' : 'var(--rule-strong)'}
            strokeDasharray={mark.used ? undefined : '5 5'}
          />
        ))}
        <ellipse
          cx={sx}
          cy={sy}
          rx={errorEllipse.semiMinor * drawn}
          ry={errorEllipse.semiMajor * drawn}
          transform={`rotate(${errorEllipse.azimuth} ${sx} ${sy})`}
          fill="var(--mark-soft)"
          stroke="var(--mark)"
        />
        {all.map((mark) => (
          <Mark
            key={`${mark.purpose}${mark.target}`}
            mark={mark}
            view={view}
            drawn={drawn}
            tolerance={setup.tolerance}
          />
        ))}
        <rect
          x={sx - 8}
          y={sy - 8}
          width="16"
          height="16"
          fill="var(--sheet)"
          stroke="var(--ink)"
          strokeWidth="2.4"
        />
        <circle cx={sx} cy={sy} r="3" fill="var(--mark)" />
        <text x={sx + Math.max(15, errorEllipse.semiMajor * drawn + 7)} y={sy + 5} className={LABEL}>
          {setup.station}
        </text>
        <NorthArrow view={view} marks={all.map((mark) => mark.published)} size={SIZE} />
        <ScaleBar view={view} length={grid} unit={unit} size={SIZE} />
      </svg>
      <figcaption className="flex justify-between gap-4 border-t border-rule px-3.5 py-2 text-[13.5px] text-ink-second">
        <span>
          Residual arrows and 95 % ellipse drawn {magnified.toLocaleString('en-US')} times larger than the
          plan
        </span>
        <span className="whitespace-nowrap">
          grid {roundLength(grid)} {unit}
        </span>
      </figcaption>
    </figure>
  );
}

/** The drawing in words, for whoever does not see it. */
function describe({ station, targets, errorEllipse, units }: Shown): string {
  const unit = unitSign(units.length);
  const marks = targets.map(({ target, residual: { northing, easting } }) =>
    northing === null || easting === null
      ? `${target}`
      : `${target} north ${signed(northing, COORDINATE)}, east ${signed(easting, COORDINATE)} ${unit}`,
  );
  return `Plan of ${station}. 95 % ellipse ${fixed(errorEllipse.semiMajor, COORDINATE)} by ${fixed(errorEllipse.semiMinor, COORDINATE)} ${unit}. Residuals: ${marks.join('; ')}.`;
}

function Mark({
  mark,
  view,
  drawn,
  tolerance,
}: {
  mark: Shown['targets'][number];
  view: View;
  drawn: number;
  tolerance: Shown['tolerance'];
}) {
  const { published, residual, used } = mark;
  const [x, y] = [view.x(published.easting), view.y(published.northing)];
  const [e, n] = [residual.easting, residual.northing];
  const over = e !== null && n !== null && Math.hypot(e, n) > tolerance.horizontal;
  const ink = over ? 'var(--fail)' : 'var(--ink)';
  // Labels stand on the side away from the middle, where the rays do not run.
  const right = x > WIDTH / 2;
  const place = { x: right ? x + 14 : x - 14, textAnchor: right ? ('start' as const) : ('end' as const) };
  return (
    <g>
      <path
        d={`M${x} ${y - 8}l7 12h-14Z`}
        fill="var(--sheet)"
        stroke={ink}
        strokeWidth="1.8"
        opacity={used ? 1 : 0.7}
      />
      <circle cx={x} cy={y} r="1.6" fill={ink} />
      {e !== null && n !== null ? <Arrow x={x} y={y} dx={e * drawn} dy={-n * drawn} /> : null}
      <text {...place} y={y - 5} className={LABEL}>
        {mark.target}
      </text>
      {e !== null && n !== null ? (
        <text {...place} y={y + 9} className="fill-ink-second text-[11.5px] max-md:hidden">
          {`N ${signed(n, COORDINATE)}  E ${signed(e, COORDINATE)}`}
        </text>
      ) : null}
    </g>
  );
}

function Arrow({ x, y, dx, dy }: { x: number; y: number; dx: number; dy: number }) {
  const length = Math.hypot(dx, dy);
  if (length < 2) return <circle cx={x} cy={y} r="2.6" fill="var(--mark)" />;
  const [ux, uy] = [dx / length, dy / length];
  const [ex, ey] = [x + dx, y + dy];
  const head = `M${ex} ${ey}l${-7 * ux - 4 * uy} ${-7 * uy + 4 * ux}l${8 * uy} ${-8 * ux}Z`;
  return (
    <>
      <path d={`M${x} ${y}L${ex} ${ey}`} stroke="var(--mark)" strokeWidth="2" />
      <path d={head} fill="var(--mark)" />
    </>
  );
}
