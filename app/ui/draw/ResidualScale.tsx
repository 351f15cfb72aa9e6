const WIDTH = 80;
const MIDDLE = WIDTH / 2;
/** From the middle to the last place of a dot; what lies beyond is an arrowhead there. */
const ARM = 33;
/** The tolerance, in arms. */
const BAND = 1 / 2.2;

/** A residual on a small ruled scale whose band is the tolerance; an arrowhead at the end says that it lies beyond. */
export function ResidualScale({ value, tolerance }: { value: number; tolerance: number }) {
  const arms = (value / tolerance) * BAND;
  const colour = Math.abs(value) > tolerance ? 'var(--fail)' : 'var(--ink)';
  const sign = Math.sign(value);
  return (
    <svg
      viewBox={`0 0 ${WIDTH} 14`}
      width={WIDTH}
      height="14"
      aria-hidden="true"
      className="inline-block align-middle print:w-[60px]"
    >
      <rect x={MIDDLE - BAND * ARM} y="2" width={2 * BAND * ARM} height="10" fill="var(--rule)" />
      <path d={`M${MIDDLE} 1v12`} stroke="var(--ink-third)" />
      {Math.abs(arms) > 1 ? (
        <path d={`M${MIDDLE + sign * (ARM + 6)} 7l${-sign * 8} -5v10Z`} fill={colour} />
      ) : (
        <circle cx={MIDDLE + arms * ARM} cy="7" r="4" fill={colour} />
      )}
    </svg>
  );
}
