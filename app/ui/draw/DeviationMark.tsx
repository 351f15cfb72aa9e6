/** Ground that is high is a diamond, ground that is low a circle; solid where it lies outside the tolerance. */
export function DeviationMark({
  x,
  y,
  high,
  outside,
  size = 5,
}: {
  x: number;
  y: number;
  high: boolean;
  outside: boolean;
  size?: number;
}) {
  const colour = high ? 'var(--cut)' : 'var(--fill)';
  const look = { fill: outside ? colour : 'var(--sheet)', stroke: colour, strokeWidth: 1.6 };
  const reach = outside ? size + 1.5 : size;
  return high ? (
    <path d={`M${x} ${y - reach}l${reach} ${reach}l${-reach} ${reach}l${-reach} ${-reach}Z`} {...look} />
  ) : (
    <circle cx={x} cy={y} r={reach * 0.8} {...look} />
  );
}
