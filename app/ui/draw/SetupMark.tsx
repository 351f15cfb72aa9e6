import { LABEL, SMALL } from './PlanParts';
import { type Drawn, figuresOf } from './setupLayout';

/** A target with its name, its residual as an arrow, and the figures of it. */
export function SetupMark({ mark, tolerance }: { mark: Drawn; tolerance: number }) {
  const { target, x, y, arrow, label } = mark;
  const { easting: e, northing: n } = target.residual;
  const over = e !== null && n !== null && Math.hypot(e, n) > tolerance;
  const ink = over ? 'var(--fail)' : 'var(--ink)';
  const figures = figuresOf(target);
  const hung = { x: label.x, textAnchor: label.anchor };
  return (
    <g>
      <path
        d={`M${x} ${y - 8}l7 12h-14Z`}
        fill="var(--sheet)"
        stroke={ink}
        strokeWidth="1.8"
        opacity={target.used ? 1 : 0.7}
      />
      <circle cx={x} cy={y} r="1.6" fill={ink} />
      {arrow ? <Arrow x={x} y={y} {...arrow} /> : null}
      <text {...hung} y={label.top + 13} className={LABEL}>
        {target.target}
      </text>
      {figures ? (
        <text {...hung} y={label.top + 27} className={`fill-ink-second max-md:hidden ${SMALL}`}>
          {figures}
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
