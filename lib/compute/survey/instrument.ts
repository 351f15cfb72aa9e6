import { ARCSECOND, MILLIMETRE } from '@/lib/compute/units/table';

/** What an instrument and its reflectors are good for: one standard deviation each, SI units. */
export interface InstrumentAccuracy {
  /** One direction observed in both faces (ISO 17123-3), rad. */
  direction: number;
  /** One zenith angle observed in both faces (ISO 17123-3), rad. */
  zenith: number;
  /** Constant part of a distance (ISO 17123-4), m. */
  distance: number;
  /** Proportional part of a distance, ppm. */
  distancePpm: number;
  /** Collimation and vertical index left in a reading of one face, rad. */
  collimation: number;
  /** Of the instrument over an occupied mark, m. */
  instrumentCentring: number;
  /** Of a reflector over its mark, m per axis. */
  targetCentring: number;
  /** Of a measured target height, m. */
  targetHeight: number;
}

/**
 * Stands where an instrument states nothing: a 5″ site instrument with 2 mm + 2 ppm, reflectors on plumbed poles
 * or tripods. Common practice; every figure is editable per instrument.
 */
export const DEFAULT_ACCURACY: InstrumentAccuracy = {
  direction: 5 * ARCSECOND,
  zenith: 5 * ARCSECOND,
  distance: 2 * MILLIMETRE,
  distancePpm: 2,
  collimation: 5 * ARCSECOND,
  instrumentCentring: 1 * MILLIMETRE,
  targetCentring: 1 * MILLIMETRE,
  targetHeight: 1 * MILLIMETRE,
};

/** Standard deviation in metres of one reading of a distance: a + b ppm as stated, added. */
export function distanceSigma(accuracy: InstrumentAccuracy, distance: number): number {
  return accuracy.distance + accuracy.distancePpm * 1e-6 * distance;
}

/**
 * Standard deviation of the mean of `left` readings in one face and `right` in the other, of a circle whose
 * stated accuracy belongs to one reading in each: a single reading counts √2.
 */
export function circleSigma(stated: number, left: number, right: number): number {
  const single = 2 * stated * stated;
  if (left === 0 || right === 0) return Math.sqrt(single / (left + right));
  return Math.sqrt((single / left + single / right) / 4);
}
