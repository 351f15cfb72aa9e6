import Delaunator from 'delaunator';

/**
 * Delaunay triangulation of points in plan. Coordinates are taken from the first point, so that large grid
 * coordinates keep their last digits in the predicates.
 *
 * @param points easting, northing, elevation a point
 * @returns three point indices a triangle; empty where all points lie on a line
 */
export function triangulate(points: Float64Array): Uint32Array {
  const count = points.length / 3;
  const plan = new Float64Array(2 * count);
  for (let i = 0; i < count; i++) {
    plan[2 * i] = points[3 * i] - points[0];
    plan[2 * i + 1] = points[3 * i + 1] - points[1];
  }
  return new Delaunator(plan).triangles as Uint32Array;
}
