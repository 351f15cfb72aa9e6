import type { ReactNode } from 'react';

/** A drawing on its own sheet, in words for whoever does not see it. */
export function Drawing({ label, children }: { label: string; children: ReactNode }) {
  return (
    <svg
      viewBox="0 0 300 180"
      role="img"
      aria-label={label}
      className="block h-auto w-full rounded border border-rule bg-sheet"
    >
      {children}
    </svg>
  );
}

/** A line that ends in a solid head. */
export function Pointer({
  from: [x1, y1],
  to: [x2, y2],
  colour = 'var(--ink)',
}: {
  from: readonly [number, number];
  to: readonly [number, number];
  colour?: string;
}) {
  const length = Math.hypot(x2 - x1, y2 - y1);
  const [ux, uy] = [(x2 - x1) / length, (y2 - y1) / length];
  const [bx, by] = [x2 - 9 * ux, y2 - 9 * uy];
  return (
    <g>
      <path d={`M${x1} ${y1}L${bx} ${by}`} stroke={colour} strokeWidth="1.8" />
      <path
        d={`M${x2} ${y2}L${bx - 4.5 * uy} ${by + 4.5 * ux}L${bx + 4.5 * uy} ${by - 4.5 * ux}Z`}
        fill={colour}
      />
    </g>
  );
}

export function Word({
  x,
  y,
  children,
  anchor = 'start',
  strong = false,
}: {
  x: number;
  y: number;
  children: string;
  anchor?: 'start' | 'middle' | 'end';
  strong?: boolean;
}) {
  return (
    <text
      x={x}
      y={y}
      textAnchor={anchor}
      className={strong ? 'fill-ink text-[13px] font-semibold' : 'fill-ink-second text-[12.5px]'}
    >
      {children}
    </text>
  );
}
