import type { Surface, SurfaceHeight } from './surface';

/** A triangulated surface: 3 coordinates a point (easting, northing, elevation; m), 3 point indices a triangle. */
export interface Tin {
  points: Float64Array;
  triangles: Uint32Array;
}

/** How far outside a triangle's edge, in barycentric measure, a place still counts as on it. */
const EDGE = 1e-9;

/** Twice the signed plan area of triangle t, m²: positive anticlockwise. */
export function planArea2({ points, triangles }: Tin, t: number): number {
  const [a, b, c] = [triangles[3 * t] * 3, triangles[3 * t + 1] * 3, triangles[3 * t + 2] * 3];
  return (
    (points[b] - points[a]) * (points[c + 1] - points[a + 1]) -
    (points[c] - points[a]) * (points[b + 1] - points[a + 1])
  );
}

/**
 * Heights on a TIN. Triangles are found through a uniform grid over the plan extent, about one triangle a cell,
 * kept as compressed lists; vertical triangles carry no height and are passed over.
 */
export function tinSurface(tin: Tin): Surface {
  const { points, triangles } = tin;
  const count = triangles.length / 3;
  const extent = planExtent(points);
  const width = Math.max(extent.maxEast - extent.minEast, 1e-6);
  const height = Math.max(extent.maxNorth - extent.minNorth, 1e-6);
  const cell = Math.sqrt((width * height) / Math.max(1, count));
  const columns = Math.min(4096, Math.max(1, Math.ceil(width / cell)));
  const rows = Math.min(4096, Math.max(1, Math.ceil(height / cell)));
  const columnOf = (e: number) => clamp(Math.floor(((e - extent.minEast) / width) * columns), columns - 1);
  const rowOf = (n: number) => clamp(Math.floor(((n - extent.minNorth) / height) * rows), rows - 1);

  const eachCell = (t: number, visit: (cellIndex: number) => void) => {
    const [a, b, c] = [triangles[3 * t] * 3, triangles[3 * t + 1] * 3, triangles[3 * t + 2] * 3];
    const west = columnOf(Math.min(points[a], points[b], points[c]));
    const east = columnOf(Math.max(points[a], points[b], points[c]));
    const south = rowOf(Math.min(points[a + 1], points[b + 1], points[c + 1]));
    const north = rowOf(Math.max(points[a + 1], points[b + 1], points[c + 1]));
    for (let r = south; r <= north; r++) for (let k = west; k <= east; k++) visit(r * columns + k);
  };
  const starts = new Uint32Array(rows * columns + 1);
  for (let t = 0; t < count; t++) eachCell(t, (index) => starts[index + 1]++);
  for (let i = 0; i < rows * columns; i++) starts[i + 1] += starts[i];
  const lists = new Uint32Array(starts[rows * columns]);
  const next = starts.slice();
  for (let t = 0; t < count; t++) {
    eachCell(t, (index) => {
      lists[next[index]++] = t;
    });
  }

  return {
    at(easting, northing) {
      const outside =
        easting < extent.minEast ||
        easting > extent.maxEast ||
        northing < extent.minNorth ||
        northing > extent.maxNorth;
      if (outside) return null;
      const index = rowOf(northing) * columns + columnOf(easting);
      for (let i = starts[index]; i < starts[index + 1]; i++) {
        const height = onTriangle(tin, lists[i], easting, northing);
        if (height) return height;
      }
      return null;
    },
  };
}

function onTriangle(tin: Tin, t: number, easting: number, northing: number): SurfaceHeight | null {
  const { points, triangles } = tin;
  const [a, b, c] = [triangles[3 * t] * 3, triangles[3 * t + 1] * 3, triangles[3 * t + 2] * 3];
  const [be, bn, bz] = [points[b] - points[a], points[b + 1] - points[a + 1], points[b + 2] - points[a + 2]];
  const [ce, cn, cz] = [points[c] - points[a], points[c + 1] - points[a + 1], points[c + 2] - points[a + 2]];
  const area = be * cn - ce * bn;
  if (area === 0) return null;
  const [pe, pn] = [easting - points[a], northing - points[a + 1]];
  const v = (pe * cn - ce * pn) / area;
  const w = (be * pn - pe * bn) / area;
  if (v < -EDGE || w < -EDGE || v + w > 1 + EDGE) return null;
  return {
    elevation: points[a + 2] + v * bz + w * cz,
    gradientEast: (bz * cn - cz * bn) / area,
    gradientNorth: (cz * be - bz * ce) / area,
    triangle: t,
  };
}

export interface PlanExtent {
  minEast: number;
  maxEast: number;
  minNorth: number;
  maxNorth: number;
}

/** Smallest rectangle around points of 3 coordinates each. */
export function planExtent(points: Float64Array): PlanExtent {
  const extent = { minEast: Infinity, maxEast: -Infinity, minNorth: Infinity, maxNorth: -Infinity };
  for (let i = 0; i < points.length; i += 3) {
    extent.minEast = Math.min(extent.minEast, points[i]);
    extent.maxEast = Math.max(extent.maxEast, points[i]);
    extent.minNorth = Math.min(extent.minNorth, points[i + 1]);
    extent.maxNorth = Math.max(extent.maxNorth, points[i + 1]);
  }
  return extent;
}

function clamp(value: number, highest: number): number {
  return Math.max(0, Math.min(highest, value));
}
