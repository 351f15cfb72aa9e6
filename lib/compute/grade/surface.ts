/** Height and gradient of a design surface at a place; null outside of it. */
export interface SurfaceHeight {
  elevation: number;
  /** ∂elevation/∂easting and ∂elevation/∂northing. */
  gradientEast: number;
  gradientNorth: number;
  /** Index of the triangle, null on a plane. */
  triangle: number | null;
}

export interface Surface {
  at(easting: number, northing: number): SurfaceHeight | null;
}

/** A plane through a point, rising by `slope` (metre per metre) towards `azimuth` (clockwise from north, rad). */
export interface PlaneDefinition {
  easting: number;
  northing: number;
  elevation: number;
  azimuth: number;
  slope: number;
}

export function planeSurface({ easting, northing, elevation, azimuth, slope }: PlaneDefinition): Surface {
  const gradientEast = slope * Math.sin(azimuth);
  const gradientNorth = slope * Math.cos(azimuth);
  return {
    at: (e, n) => ({
      elevation: elevation + gradientEast * (e - easting) + gradientNorth * (n - northing),
      gradientEast,
      gradientNorth,
      triangle: null,
    }),
  };
}
