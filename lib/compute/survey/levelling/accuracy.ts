import { MILLIMETRE } from '@/lib/compute/units/table';

/** Metres in a kilometre, for the figures that levelling states per kilometre. */
const KILOMETRE = 1000;

/** A figure in mm per √km as metres per √metre. */
export function perRootMetre(mmPerRootKm: number): number {
  return (mmPerRootKm * MILLIMETRE) / Math.sqrt(KILOMETRE);
}

/** Metres per √metre as mm per √km. */
export function mmPerRootKm(perRoot: number): number {
  return (perRoot * Math.sqrt(KILOMETRE)) / MILLIMETRE;
}

/**
 * Stands where a level states nothing: 2 mm for a kilometre of double-run levelling, an automatic level and a folding
 * staff. Common practice; editable per instrument.
 */
export const DEFAULT_LEVEL_SIGMA = perRootMetre(2);

/**
 * Standard deviation of one run, m per √m of its length: ISO 17123-2 states the mean of a run there and back, so that
 * one way counts √2.
 *
 * @param doubleRun of double-run levelling, m per √m
 */
export function oneWaySigma(doubleRun: number): number {
  return Math.SQRT2 * doubleRun;
}

/** A sight whose length nobody measured, m. Common practice: 30 m back and 30 m forward. */
export const ASSUMED_SIGHT = 30;
/** Beyond this, m, a staff is not read to its millimetre any more. Common practice; not a rule. */
export const LONG_SIGHT = 100;
/** However short a sight, a reading is no better than one of this length, m: graduation and bubble remain. */
const SHORTEST_FOR_SIGMA = 10;

/** Standard deviation of one staff reading, m. */
export function readingSigma(oneWay: number, distance: number): number {
  return oneWay * Math.sqrt(Math.max(distance, SHORTEST_FOR_SIGMA));
}

/**
 * A level is adjusted where its line of sight is off by more than 5 mm over 50 m, the strict end of "5 mm over 40 to
 * 50 m" (common practice), rad.
 */
export const COLLIMATION_LIMIT = (5 * MILLIMETRE) / 50;

/** What the line of sight of a level without a test may be off by, one standard deviation: half the limit, rad. */
export const UNTESTED_COLLIMATION = COLLIMATION_LIMIT / 2;

/**
 * What the curved earth and refraction add to a staff reading, per square metre of distance: (1 − k)/2R.
 *
 * @param refraction coefficient k
 * @param earthRadius R, m
 */
export function curvatureOf(refraction: number, earthRadius: number): number {
  return (1 - refraction) / (2 * earthRadius);
}
