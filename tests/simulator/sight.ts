/** A point in grid easting and northing and in height, m. */
export interface Place {
  easting: number;
  northing: number;
  height: number;
}

export interface Ground {
  /** Radius of the sphere at the tilting axis' level, m. */
  earthRadius: number;
  /** grid = ground × factor, horizontal. */
  combinedFactor: number;
}

export interface Sight {
  /** From grid north, clockwise, rad in [0, 2π). */
  azimuth: number;
  /** Angle between the plumb line and the ray as it leaves the instrument, rad. */
  zenith: number;
  /** Length of the ray, m. */
  slope: number;
}

/**
 * What a faultless instrument would read from a tilting axis to a reflector, over a spherical earth in air whose
 * refractive index falls evenly with height. The ground distance D spans D/R at the earth's centre; the ray's
 * curvature is (k/R)·sin(zenith), so that with the reflector's distance Y from the plumb line it leaves its chord by
 * kY/2R, and is longer than the chord by a sixth of that angle squared.
 */
export function sightTo(from: Place, to: Place, k: number, { earthRadius, combinedFactor }: Ground): Sight {
  const east = to.easting - from.easting;
  const north = to.northing - from.northing;
  const rise = to.height - from.height;
  const angle = Math.hypot(east, north) / combinedFactor / earthRadius;
  const across = (earthRadius + rise) * Math.sin(angle);
  const up = rise * Math.cos(angle) - 2 * earthRadius * Math.sin(angle / 2) ** 2;
  const bend = (k * across) / (2 * earthRadius);
  return {
    azimuth: turn(Math.atan2(east, north)),
    zenith: Math.atan2(across, up) - bend,
    slope: Math.hypot(across, up) * (1 + bend ** 2 / 6),
  };
}

/** The same direction in [0, 2π). */
export function turn(angle: number): number {
  const whole = 2 * Math.PI;
  const rest = angle - whole * Math.floor(angle / whole);
  return rest < whole ? rest : 0;
}
