/** A residual on a small ruled scale whose band is the tolerance. */
export function ResidualScale({ value, tolerance }: { value: number; tolerance: number }) {
  const reach = 2.2 * tolerance;
  const x = 40 + Math.max(-1, Math.min(1, value / reach)) * 38;
  const band = (tolerance / reach) * 38;
  const outside = Math.abs(value) > tolerance;
  return (
    <svg viewBox="0 0 80 14" width="80" height="14" aria-hidden="true" className="inline-block align-middle">
      <rect x={40 - band} y="2" width={2 * band} height="10" fill="var(--rule)" />
      <path d="M40 1v12" stroke="var(--ink-third)" />
      <circle cx={x} cy="7" r="4" fill={outside ? 'var(--fail)' : 'var(--ink)'} />
    </svg>
  );
}
