import type { InferSelectModel } from 'drizzle-orm';
import type * as z from 'zod';
import type { instrumentCalibrations } from '@/db/schema';
import { DEFAULT_WAVELENGTH, REFERENCE_ATMOSPHERE, refractivity } from '@/lib/compute/survey/atmosphere';
import { DEFAULT_ACCURACY } from '@/lib/compute/survey/instrument';
import { perRootMetre } from '@/lib/compute/survey/levelling/accuracy';
import { ARCSECOND, MILLIMETRE } from '@/lib/compute/units/table';
import type { CalibrationCreate } from '@/openapi/schemas/instrument';

/** Stated figures in SI units; what is not stated is taken from common practice. */
export function calibrationRow(
  stated: z.output<typeof CalibrationCreate>,
  of: { organizationId: string; instrumentId: string; version: number; createdAt: string },
): InferSelectModel<typeof instrumentCalibrations> {
  const { accuracy } = stated;
  const direction = accuracy ? accuracy.directionArcsec * ARCSECOND : DEFAULT_ACCURACY.direction;
  const metres = (millimetres: number | undefined, otherwise: number) =>
    millimetres === undefined ? otherwise : millimetres * MILLIMETRE;
  const wavelength =
    stated.carrierWavelengthNm === undefined ? DEFAULT_WAVELENGTH : stated.carrierWavelengthNm * 1e-9;
  return {
    ...of,
    direction,
    zenith: accuracy ? accuracy.zenithArcsec * ARCSECOND : DEFAULT_ACCURACY.zenith,
    distance: metres(accuracy?.distanceMm, DEFAULT_ACCURACY.distance),
    distancePpm: accuracy?.distancePpm ?? DEFAULT_ACCURACY.distancePpm,
    accuracyStated: accuracy !== undefined,
    collimation:
      stated.collimationSigmaArcsec === undefined ? direction : stated.collimationSigmaArcsec * ARCSECOND,
    instrumentCentring: metres(stated.instrumentCentringSigmaMm, DEFAULT_ACCURACY.instrumentCentring),
    targetCentring: metres(stated.targetCentringSigmaMm, DEFAULT_ACCURACY.targetCentring),
    targetHeight: metres(stated.targetHeightSigmaMm, DEFAULT_ACCURACY.targetHeight),
    carrierWavelength: wavelength,
    referenceRefractivity: stated.referenceRefractivity ?? refractivity(REFERENCE_ATMOSPHERE, wavelength),
    levelSigma: stated.levelSigmaMmPerKm === undefined ? null : perRootMetre(stated.levelSigmaMmPerKm),
    note: stated.note ?? null,
  };
}
