import { fixed } from '@/app/ui/numbers';
import { type Box, burden, type Obstacles } from './labels';
import type { View } from './scale';

export interface Size {
  width: number;
  height: number;
}

/** Words in a plan: larger in its own measure on a narrow screen, where the whole is drawn smaller. */
const HALO = 'stroke-sheet stroke-[3px] [paint-order:stroke] [stroke-linejoin:round]';
export const LABEL = `fill-ink text-[12.5px] font-semibold max-md:text-[20px] ${HALO}`;
export const SMALL = `text-[11.5px] max-md:text-[18px] ${HALO}`;
/** Room that a name takes at its larger size, a character. */
export const LETTER = 11.6;

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

/** The room of the arrow, from its upper left. */
const NORTH = { width: 36, height: 78 };

/** Stands in the corner where it covers least; the lower left is the scale's. */
export function northPlace(drawn: Obstacles, { width, height }: Size): Box {
  const [left, right, top, bottom] = [22, width - 22 - NORTH.width, 8, height - 8 - NORTH.height];
  const corners = [
    { x: right, y: top },
    { x: left, y: top },
    { x: right, y: bottom },
  ].map((corner) => ({ ...corner, ...NORTH }));
  return corners.reduce((best, box) => (burden(box, drawn) < burden(best, drawn) ? box : best));
}

export function NorthArrow({ at }: { at: Box }) {
  const x = at.x + at.width / 2;
  return (
    <g>
      <path d={`M${x} ${at.y + 14}v38`} stroke="var(--ink)" strokeWidth="1.6" />
      <path d={`M${x} ${at.y + 8}l6 15h-12Z`} fill="var(--ink)" />
      <text x={x} y={at.y + 70} textAnchor="middle" className={`fill-ink-second ${SMALL}`}>
        N
      </text>
    </g>
  );
}

/** The room of the scale at the lower left. */
export function scaleRoom(pixels: number, { height }: Size): Box {
  return { x: 14, y: height - 52, width: pixels + 12, height: 40 };
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

/** A length of one figure, as steps of a grid are. */
export function roundLength(length: number): string {
  return fixed(length, Math.max(0, -Math.floor(Math.log10(length) + 1e-9)));
}
