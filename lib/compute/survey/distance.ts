import { MILLIMETRE } from '@/lib/compute/units/table';

export interface DistanceReading {
  /** As displayed, m. */
  slopeDistance: number;
  /** Constant of the reflector, counted from the distance meter's own zero, mm. */
  prismConstantMm: number;
  /** Constant that the instrument had applied already, mm. */
  prismConstantAppliedMm: number;
  /** Atmospheric correction that the instrument had applied already, ppm, positive when it lengthens. */
  appliedPpm: number;
}

/**
 * True slope distance in metres: (slope + constant − applied constant)·(1 + (ppm − applied ppm)·10⁻⁶).
 *
 * @param ppm atmospheric correction wanted; `null` where the atmosphere is unknown: the applied one stands
 */
export function trueSlopeDistance(reading: DistanceReading, ppm: number | null): number {
  const constant = (reading.prismConstantMm - reading.prismConstantAppliedMm) * MILLIMETRE;
  const correction = ppm === null ? 0 : (ppm - reading.appliedPpm) * 1e-6;
  return (reading.slopeDistance + constant) * (1 + correction);
}
