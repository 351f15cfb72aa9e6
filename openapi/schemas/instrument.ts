import * as z from 'zod';
import { Id, Moment, Name, page, Text } from './primitives';

const millimetres = z.number().min(0).max(100);

export const Accuracy = z
  .strictObject({
    directionArcsec: z.number().gt(0).max(120),
    zenithArcsec: z.number().gt(0).max(120),
    distanceMm: z.number().gt(0).max(100),
    distancePpm: z.number().min(0).max(100),
  })
  .meta({
    id: 'Accuracy',
    description: 'As stated after ISO 17123: one direction observed in both faces; distances a + b ppm.',
    example: { directionArcsec: 2, zenithArcsec: 2, distanceMm: 1.5, distancePpm: 2 },
  });

const stated = {
  accuracy: Accuracy.optional().meta({
    description: '5″, 5″, 2 mm + 2 ppm where nothing is stated (common practice).',
  }),
  collimationSigmaArcsec: z.number().min(0).max(120).optional().meta({
    description: 'What collimation and index may leave in a single face; directionArcsec by default.',
  }),
  instrumentCentringSigmaMm: millimetres.optional(),
  targetCentringSigmaMm: millimetres.optional(),
  targetHeightSigmaMm: millimetres.optional(),
  levelSigmaMmPerKm: z.number().gt(0).max(100).optional().meta({
    description:
      'Of a level: one kilometre there and back after ISO 17123-2; 2 where nothing is stated (common practice).',
  }),
  carrierWavelengthNm: z.number().min(400).max(1100).optional().meta({ description: '658 by default.' }),
  referenceRefractivity: z.number().min(200).max(400).optional().meta({
    description:
      '(n−1)·10⁶ for which the distance meter is set up; that of 12 °C, 1013.25 hPa, 60 % by default.',
  }),
};

export const InstrumentCreate = z
  .strictObject({
    name: Name,
    kind: z.enum(['totalStation', 'rover', 'level', 'machine']),
    serial: Text.optional(),
    ...stated,
  })
  .meta({
    id: 'InstrumentCreate',
    example: {
      name: 'TS-2',
      kind: 'totalStation',
      serial: '204417',
      accuracy: { directionArcsec: 2, zenithArcsec: 2, distanceMm: 1.5, distancePpm: 2 },
    },
  });

export const CalibrationCreate = z
  .strictObject({ ...stated, note: Text.optional() })
  .meta({ id: 'CalibrationCreate', description: 'New stated figures; earlier setups keep theirs.' });

export const Calibration = z
  .object({
    version: z.int(),
    accuracy: Accuracy,
    accuracySource: z.enum(['stated', 'default']),
    collimationSigmaArcsec: z.number(),
    instrumentCentringSigmaMm: z.number(),
    targetCentringSigmaMm: z.number(),
    targetHeightSigmaMm: z.number(),
    levelSigmaMmPerKm: z.number(),
    carrierWavelengthNm: z.number(),
    referenceRefractivity: z.number(),
    note: z.string().nullable(),
    createdAt: Moment,
  })
  .meta({ id: 'Calibration' });

export const Instrument = z
  .object({
    id: Id,
    name: z.string(),
    kind: z.enum(['totalStation', 'rover', 'level', 'machine']),
    serial: z.string().nullable(),
    calibration: Calibration,
    createdAt: Moment,
  })
  .meta({ id: 'Instrument' });

export const InstrumentPage = page('InstrumentPage', Instrument);
