import Flatbush from 'flatbush';
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
 * Heights on a TIN. Triangles are found by their plan rectangles through a packed Hilbert R-tree, whose size follows
 * the number of triangles whatever their shape; vertical triangles carry no height and are passed over. Where several
 * meet, the first of the triangulation counts.
 */
export function tinSurface(tin: Tin): Surface {
  const { points, triangles } = tin;
  const count = triangles.length / 3;
  const tree = new Flatbush(count);
  for (let t = 0; t < count; t++) {
    const [a, b, c] = [triangles[3 * t] * 3, triangles[3 * t + 1] * 3, triangles[3 * t + 2] * 3];
    tree.add(
      Math.min(points[a], points[b], points[c]),
      Math.min(points[a + 1], points[b + 1], points[c + 1]),
      Math.max(points[a], points[b], points[c]),
      Math.max(points[a + 1], points[b + 1], points[c + 1]),
    );
  }
  tree.finish();

  return {
    at(easting, northing) {
      let found: SurfaceHeight | null = null;
      let first = count;
      tree.search(easting, northing, easting, northing, (t) => {
        const height = t < first ? onTriangle(tin, t, easting, northing) : null;
        if (height) {
          found = height;
          first = t;
        }
        return false;
      });
      return found;
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
