import type { Surroundings } from './surroundings';

/**
 * The ray from a tilting axis to a reflector over a curved earth with refraction. With the ground distance D at
 * the axis' level, the difference of heights Δh, the radius R and the coefficient of refraction k:
 *
 *   Y = D(1 + Δh/R)          across the station's plumb line
 *   X = Δh − D²/2R           along it
 *   slope = √(Y² + X²),  zenith reading = atan2(Y, X) − kD/2R
 *
 * (Torge and Müller, Geodesy, §5.5; to second order in D/R). Grid distance = combined factor × D.
 */
export interface Ray {
  azimuth: number;
  zenith: number;
  slope: number;
  /** Grid distance, m. */
  grid: number;
  /** ∂azimuth per metre of easting and northing of the reflector. */
  azimuthEast: number;
  azimuthNorth: number;
  /** ∂zenith and ∂slope per metre of grid distance and of height of the reflector. */
  zenithGrid: number;
  zenithHeight: number;
  slopeGrid: number;
  slopeHeight: number;
  /** ∂zenith per unit of k. */
  zenithRefraction: number;
}

/** @param east,north,height reflector minus tilting axis, m (grid, grid, ground) */
export function rayTo(
  east: number,
  north: number,
  height: number,
  k: number,
  { combinedFactor, earthRadius }: Surroundings,
): Ray {
  // Math.hypot allocates; this runs for every reading of every iteration.
  const grid = Math.sqrt(east * east + north * north);
  const d = grid / combinedFactor;
  const y = d * (1 + height / earthRadius);
  const x = height - (d * d) / (2 * earthRadius);
  const slope = Math.sqrt(y * y + x * x);
  const yD = 1 + height / earthRadius;
  const yH = d / earthRadius;
  const xD = -d / earthRadius;
  const inverse = 1 / (slope * slope);
  const bend = 1 / (2 * earthRadius);
  return {
    azimuth: Math.atan2(east, north),
    zenith: Math.atan2(y, x) - k * d * bend,
    slope,
    grid,
    azimuthEast: north / (grid * grid),
    azimuthNorth: -east / (grid * grid),
    zenithGrid: ((x * yD - y * xD) * inverse - k * bend) / combinedFactor,
    zenithHeight: (x * yH - y) * inverse,
    slopeGrid: (y * yD + x * xD) / slope / combinedFactor,
    slopeHeight: (y * yH + x) / slope,
    zenithRefraction: -d * bend,
  };
}

export interface Offset {
  /** Grid distance, m. */
  grid: number;
  /** Reflector above the tilting axis, m. */
  height: number;
}

/** The offset that a zenith reading and a slope distance span: `rayTo` the other way round. */
export function offsetFromZenith(
  zenith: number,
  slope: number,
  k: number,
  surroundings: Surroundings,
): Offset {
  const { combinedFactor, earthRadius } = surroundings;
  let d = slope * Math.sin(zenith);
  let height = slope * Math.cos(zenith);
  for (let pass = 0; pass < 6; pass++) {
    const straight = zenith + (k * d) / (2 * earthRadius);
    height = slope * Math.cos(straight) + (d * d) / (2 * earthRadius);
    d = (slope * Math.sin(straight)) / (1 + height / earthRadius);
  }
  return { grid: d * combinedFactor, height };
}

/** The offset that a slope distance spans towards a reflector whose height above the axis is known. */
export function offsetFromHeight(height: number, slope: number, surroundings: Surroundings): Offset {
  const { combinedFactor, earthRadius } = surroundings;
  let d = Math.sqrt(Math.max(0, slope * slope - height * height));
  for (let pass = 0; pass < 6; pass++) {
    const x = height - (d * d) / (2 * earthRadius);
    d = Math.sqrt(Math.max(0, slope * slope - x * x)) / (1 + height / earthRadius);
  }
  return { grid: d * combinedFactor, height };
}
