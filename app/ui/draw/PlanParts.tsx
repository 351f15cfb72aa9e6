import { fixed } from '@/app/ui/numbers';
import type { View } from './scale';

export interface Size {
  width: number;
  height: number;
}

/** Words in a plan: larger in its own measure on a narrow screen, where the whole is drawn smaller. */
export const LABEL = 'fill-ink text-[12.5px] font-semibold max-md:text-[20px]';
export const SMALL = 'text-[11.5px] max-md:text-[18px]';

export function Grid({ view, step, size }: { view: View; step: number; size: Size }) {
  const pixels = step * view.scale;
  const lines = (length: number) =>
    Array.from({ length: Math.floor(length / pixels) + 1 }, (_, i) => i * pixels);
  return (
    <g stroke="var(--rule)" strokeWidth="1">
      {lines(size.width).map((x) => (
        <path key={`x${x}`} d={`M${x} 0V${size.height}`} />
      ))}
      {lines(size.height).map((y) => (
        <path key={`y${y}`} d={`M0 ${y}H${size.width}`} />
      ))}
    </g>
  );
}

/** Stands at the top right or, where a mark needs that corner, at the top left. */
export function NorthArrow({
  view,
  marks,
  size: { width },
}: {
  view: View;
  marks: readonly { easting: number; northing: number }[];
  size: Size;
}) {
  const taken = marks.some((mark) => view.x(mark.easting) > width - 200 && view.y(mark.northing) < 100);
  const x = taken ? 40 : width - 40;
  return (
    <g>
      <path d={`M${x} 22v38`} stroke="var(--ink)" strokeWidth="1.6" />
      <path d={`M${x} 16l6 15h-12Z`} fill="var(--ink)" />
      <text x={x} y="78" textAnchor="middle" className={`fill-ink-second ${SMALL}`}>
        N
      </text>
    </g>
  );
}

export function ScaleBar({
  view,
  length,
  unit,
  size: { height },
}: {
  view: View;
  length: number;
  unit: string;
  size: Size;
}) {
  const pixels = length * view.scale;
  return (
    <g>
      <path
        d={`M20 ${height - 26}v8h${pixels}v-8M${20 + pixels / 2} ${height - 22}v4`}
        fill="none"
        stroke="var(--ink)"
      />
      <text x={20 + pixels} y={height - 31} textAnchor="end" className={`fill-ink-second ${SMALL}`}>
        {roundLength(length)} {unit}
      </text>
    </g>
  );
}

export function roundLength(length: number): string {
  return fixed(length, length < 1 ? 1 : 0);
}
