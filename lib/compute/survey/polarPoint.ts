import { offsetFromHeight, offsetFromZenith } from './ray';
import type { Surroundings } from './surroundings';

/** A setup that shots can be taken from: the station and what is uncertain about it. */
export interface Station {
  easting: number;
  northing: number;
  /** Elevation of the tilting axis. */
  axis: number;
  orientation: number;
  /** Coefficient of refraction as fitted. */
  refraction: number;
  /** Covariance of (easting, northing, axis, orientation, refraction), 5 × 5 row by row. */
  covariance: ArrayLike<number>;
}

export const STATION_UNKNOWNS = 5;

export interface Point {
  easting: number;
  northing: number;
  elevation: number;
}

/** A mark by polar coordinates: reduced direction, zenith angle and true slope distance to its reflector. */
export function polarPoint(
  station: Pick<Station, 'easting' | 'northing' | 'axis' | 'orientation' | 'refraction'>,
  reading: { direction: number; zenith: number; distance: number; targetHeight: number },
  surroundings: Surroundings,
): Point {
  const offset = offsetFromZenith(reading.zenith, reading.distance, station.refraction, surroundings);
  return along(station, reading.direction, offset, reading.targetHeight);
}

/** The same without a zenith reading, towards a mark whose elevation is known. */
export function polarPointAtElevation(
  station: Pick<Station, 'easting' | 'northing' | 'axis' | 'orientation'>,
  reading: { direction: number; distance: number; targetHeight: number; elevation: number },
  surroundings: Surroundings,
): Point {
  const height = reading.elevation + reading.targetHeight - station.axis;
  const offset = offsetFromHeight(height, reading.distance, surroundings);
  return along(station, reading.direction, offset, reading.targetHeight);
}

function along(
  station: Pick<Station, 'easting' | 'northing' | 'axis' | 'orientation'>,
  direction: number,
  offset: { grid: number; height: number },
  targetHeight: number,
): Point {
  const azimuth = station.orientation + direction;
  return {
    easting: station.easting + offset.grid * Math.sin(azimuth),
    northing: station.northing + offset.grid * Math.cos(azimuth),
    elevation: station.axis + offset.height - targetHeight,
  };
}

/**
 * ∂(easting, northing, elevation) of a polar point by the station's unknowns (3 × 5) and by direction, zenith,
 * distance and target height (3 × 4). To first order; the earth's curvature changes these by less than 10⁻⁴.
 */
export function polarJacobian(
  station: Pick<Station, 'orientation' | 'refraction'>,
  reading: { direction: number; zenith: number; distance: number },
  { combinedFactor, earthRadius }: Surroundings,
): { station: Float64Array; reading: Float64Array } {
  const azimuth = station.orientation + reading.direction;
  const [sine, cosine] = [Math.sin(azimuth), Math.cos(azimuth)];
  const [across, along_] = [
    reading.distance * Math.sin(reading.zenith),
    reading.distance * Math.cos(reading.zenith),
  ];
  const grid = across * combinedFactor;
  const east = grid * cosine;
  const north = -grid * sine;
  const height = -(across * across) / (2 * earthRadius);
  const gridZenith = along_ * combinedFactor;
  const gridDistance = Math.sin(reading.zenith) * combinedFactor;
  return {
    station: Float64Array.of(1, 0, 0, east, 0, 0, 1, 0, north, 0, 0, 0, 1, 0, height),
    reading: Float64Array.of(
      ...[east, gridZenith * sine, gridDistance * sine, 0],
      ...[north, gridZenith * cosine, gridDistance * cosine, 0],
      ...[0, -across, Math.cos(reading.zenith), -1],
    ),
  };
}

/** Covariance of a polar point (3 × 3) from the station and independent readings. */
export function polarCovariance(
  station: Station,
  reading: { direction: number; zenith: number; distance: number },
  sigmas: { direction: number; zenith: number; distance: number; targetHeight: number; centring: number },
  surroundings: Surroundings,
): Float64Array {
  const jacobian = polarJacobian(station, reading, surroundings);
  const covariance = propagate(jacobian.station, station.covariance, STATION_UNKNOWNS);
  const own = [sigmas.direction, sigmas.zenith, sigmas.distance, sigmas.targetHeight];
  for (let i = 0; i < 3; i++) {
    for (let j = 0; j < 3; j++) {
      for (let k = 0; k < 4; k++) {
        covariance[i * 3 + j] += jacobian.reading[i * 4 + k] * jacobian.reading[j * 4 + k] * own[k] ** 2;
      }
    }
  }
  covariance[0] += sigmas.centring ** 2;
  covariance[4] += sigmas.centring ** 2;
  return covariance;
}

/** J Q Jᵀ for a 3 × n Jacobian. */
export function propagate(jacobian: Float64Array, covariance: ArrayLike<number>, n: number): Float64Array {
  const result = new Float64Array(9);
  for (let i = 0; i < 3; i++) {
    for (let j = 0; j < 3; j++) {
      let sum = 0;
      for (let a = 0; a < n; a++) {
        for (let b = 0; b < n; b++) sum += jacobian[i * n + a] * covariance[a * n + b] * jacobian[j * n + b];
      }
      result[i * 3 + j] = sum;
    }
  }
  return result;
}
