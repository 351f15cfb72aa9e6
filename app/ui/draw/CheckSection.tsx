import { COORDINATE, fixed, unitSign } from '@/app/ui/numbers';
import { DeviationMark } from './DeviationMark';
import { type GradeShot, isOutside } from './deviation';

const WIDTH = 420;
const HEIGHT = 132;
const EDGE = 26;

/** One check from the side: the surface, the layer with its tolerance band, and the ground between them. */
export function CheckSection({
  check,
  surface,
  layer,
}: {
  check: GradeShot;
  surface: string;
  layer: string;
}) {
  const { designElevation, layerElevation, point, tolerance, deviation } = check;
  const height = (elevation: number) => `${fixed(elevation, COORDINATE)} ${unitSign(check.units.length)}`;
  if (designElevation === null || layerElevation === null || deviation === null) return null;
  const top = Math.max(designElevation, layerElevation + tolerance.above, point.elevation);
  const bottom = Math.min(designElevation, layerElevation - tolerance.below, point.elevation);
  const y = (elevation: number) =>
    EDGE + ((top - elevation) / Math.max(top - bottom, 1e-6)) * (HEIGHT - 2 * EDGE);
  return (
    <svg
      viewBox={`0 0 ${WIDTH} ${HEIGHT}`}
      role="img"
      aria-label={`From the side: ${surface} at ${height(designElevation)}, ${layer} at ${height(layerElevation)}, ground at ${height(point.elevation)}.`}
      className="mb-4 block h-auto w-full rounded border border-rule bg-sheet"
    >
      <rect
        x="12"
        y={y(layerElevation + tolerance.above)}
        width={WIDTH - 24}
        height={y(layerElevation - tolerance.below) - y(layerElevation + tolerance.above)}
        fill="var(--rule)"
      />
      {surface === layer ? null : (
        <Level y={y(designElevation)} label={`${surface} ${height(designElevation)}`} dashed />
      )}
      <Level
        y={y(layerElevation)}
        clearOf={y(layerElevation + tolerance.above)}
        label={`${layer} ${height(layerElevation)}`}
      />
      <DeviationMark
        x={WIDTH * 0.62}
        y={y(point.elevation)}
        high={deviation > 0}
        outside={isOutside(check)}
        size={7}
      />
      <text x={WIDTH * 0.62 + 14} y={y(point.elevation) - 6} className="fill-ink text-[13px] font-semibold">
        ground {height(point.elevation)}
      </text>
    </svg>
  );
}

/** A height with its name above it, and above the edge of a band around it. */
function Level({
  y,
  label,
  clearOf = y,
  dashed = false,
}: {
  y: number;
  label: string;
  clearOf?: number;
  dashed?: boolean;
}) {
  return (
    <g>
      <path
        d={`M12 ${y}H${WIDTH - 12}`}
        stroke={dashed ? 'var(--ink-third)' : 'var(--ink)'}
        strokeWidth={dashed ? 1.4 : 2.2}
        strokeDasharray={dashed ? '5 4' : undefined}
      />
      <text x="16" y={clearOf - 5} className="fill-ink-second text-[12.5px]">
        {label}
      </text>
    </g>
  );
}
