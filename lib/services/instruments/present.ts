import type { InferSelectModel } from 'drizzle-orm';
import type * as z from 'zod';
import type { instrumentCalibrations, instruments } from '@/db/schema';
import { DEFAULT_LEVEL_SIGMA, mmPerRootKm } from '@/lib/compute/survey/levelling/accuracy';
import { toArcseconds } from '@/lib/compute/units/convert';
import { MILLIMETRE } from '@/lib/compute/units/table';
import { asMoment } from '@/lib/services/moments';
import type { Instrument } from '@/openapi/schemas/instrument';

export interface InstrumentRow {
  instrument: InferSelectModel<typeof instruments>;
  calibration: InferSelectModel<typeof instrumentCalibrations>;
}

const clean = (value: number) => Number(value.toPrecision(15));

export function presentInstrument({
  instrument,
  calibration: c,
}: InstrumentRow): z.output<typeof Instrument> {
  const millimetres = (metres: number) => clean(metres / MILLIMETRE);
  return {
    id: instrument.id,
    name: instrument.name,
    kind: instrument.kind,
    serial: instrument.serial,
    calibration: {
      version: c.version,
      accuracy: {
        directionArcsec: toArcseconds(c.direction),
        zenithArcsec: toArcseconds(c.zenith),
        distanceMm: millimetres(c.distance),
        distancePpm: c.distancePpm,
      },
      accuracySource: c.accuracyStated ? 'stated' : 'default',
      collimationSigmaArcsec: toArcseconds(c.collimation),
      instrumentCentringSigmaMm: millimetres(c.instrumentCentring),
      targetCentringSigmaMm: millimetres(c.targetCentring),
      targetHeightSigmaMm: millimetres(c.targetHeight),
      levelSigmaMmPerKm: Number(mmPerRootKm(c.levelSigma ?? DEFAULT_LEVEL_SIGMA).toPrecision(12)),
      carrierWavelengthNm: clean(c.carrierWavelength * 1e9),
      referenceRefractivity: c.referenceRefractivity,
      note: c.note,
      createdAt: asMoment(c.createdAt),
    },
    createdAt: asMoment(instrument.createdAt),
  };
}
