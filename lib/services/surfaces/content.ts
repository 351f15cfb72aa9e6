import type * as z from 'zod';
import type { SurfaceContent } from '@/lib/compute/grade/surfaceBytes';
import { planArea2 } from '@/lib/compute/grade/tin';
import { triangulate } from '@/lib/compute/grade/triangulate';
import { toRadians } from '@/lib/compute/units/convert';
import { invalid, invalidItems } from '@/lib/problem';
import { Lengths } from '@/lib/services/lengths';
import { problemItem } from '@/openapi/problemItem';
import type { SurfaceCreate } from '@/openapi/schemas/design';
import type { ProblemItem } from '@/openapi/schemas/problem';

type Sent = z.output<typeof SurfaceCreate>;

/** Faults listed at the most; a file that is wrong throughout need not say so a hundred thousand times. */
const MAX_FAULTS = 100;

/**
 * The content of a surface in metres.
 *
 * @throws Problem where points or triangles do not make one, with the places
 */
export function surfaceContent(sent: Sent): SurfaceContent {
  const length = new Lengths(sent.units.length);
  if (sent.plane) {
    const { through, azimuth, slopePercent } = sent.plane;
    const plane = {
      easting: length.in(through.easting),
      northing: length.in(through.northing),
      elevation: length.in(through.elevation),
      azimuth: toRadians(azimuth, 'deg'),
      slope: slopePercent / 100,
    };
    return { kind: 'plane', plane };
  }
  const rows = sent.points!;
  refuseTwoHeights(rows);
  const points = new Float64Array(rows.length * 3);
  rows.forEach((row, i) => {
    for (let k = 0; k < 3; k++) points[3 * i + k] = length.in(row[k]);
  });
  const triangles = sent.triangles ? Uint32Array.from(sent.triangles.flat()) : triangulate(points);
  if (triangles.length === 0) throw invalid('/points', 'surface_degenerate', 'All points lie on one line.');
  const tin = { points, triangles };
  if (sent.triangles) refuseTriangles(sent.triangles, tin);
  return { kind: 'tin', tin };
}

function refuseTwoHeights(rows: readonly (readonly [number, number, number])[]): void {
  const seen = new Map<string, number>();
  const faults: ProblemItem[] = [];
  rows.forEach(([easting, northing, elevation], i) => {
    const key = `${easting}/${northing}`;
    const first = seen.get(key);
    if (first === undefined) seen.set(key, i);
    else if (rows[first][2] !== elevation && faults.length < MAX_FAULTS) {
      const detail = `Points ${first} and ${i} stand at one place with elevations ${rows[first][2]} and ${elevation}.`;
      faults.push(problemItem(`/points/${i}`, 'point_repeated', detail));
    }
  });
  if (faults.length > 0) throw invalidItems(faults);
}

function refuseTriangles(
  sent: readonly (readonly [number, number, number])[],
  tin: { points: Float64Array; triangles: Uint32Array },
): void {
  const count = tin.points.length / 3;
  const faults: ProblemItem[] = [];
  sent.forEach((corners, t) => {
    if (faults.length >= MAX_FAULTS) return;
    const missing = corners.find((corner) => corner >= count);
    const fault =
      missing !== undefined
        ? `Triangle ${t} names point ${missing}; there are ${count}.`
        : new Set(corners).size < 3
          ? `Triangle ${t} names a point twice.`
          : planArea2(tin, t) === 0
            ? `Triangle ${t} has no area in plan.`
            : null;
    if (fault) faults.push(problemItem(`/triangles/${t}`, 'triangle_invalid', fault));
  });
  if (faults.length > 0) throw invalidItems(faults);
}
