import * as z from 'zod';
import { Id, Moment } from './primitives';

const figure = z.number();
const maybe = z.number().nullable();

const FaceHistory = z
  .object({
    state: z.enum(['unknown', 'steady', 'changed', 'drifting']),
    text: z.string(),
    action: z.string().optional(),
    currentArcsec: maybe.meta({ description: 'Mean since it changed last.' }),
    sigmaArcsec: maybe,
    allowanceArcsec: figure.meta({
      description: 'One standard deviation of what a single face is reckoned to leave in it.',
    }),
    large: z.boolean().meta({ description: 'Beyond 3.29 times the allowance.' }),
    change: z
      .object({
        setupId: Id,
        station: z.string(),
        observedAt: Moment,
        fromArcsec: figure,
        toArcsec: figure,
        standardised: figure,
      })
      .nullable()
      .meta({ description: 'The first setup since the change, and the means before and after.' }),
    driftArcsecPerDay: maybe,
    driftSigmaArcsecPerDay: maybe,
  })
  .meta({ id: 'FaceHistory' });

export const Collimation = z
  .object({
    instrument: z.string(),
    calibration: z.int().meta({ description: 'The record begins anew with each calibration.' }),
    twoCollimation: FaceHistory,
    verticalIndex: FaceHistory,
    data: z
      .array(
        z.object({
          setupId: Id,
          station: z.string(),
          observedAt: Moment,
          calibration: z.int(),
          twoCollimationArcsec: maybe,
          twoCollimationSigmaArcsec: maybe,
          collimationPairs: z.int().nullable(),
          verticalIndexArcsec: maybe,
          verticalIndexSigmaArcsec: maybe,
          indexPairs: z.int().nullable(),
        }),
      )
      .meta({ description: 'Setups with both faces, newest first; superseded ones left out.' }),
  })
  .meta({
    id: 'Collimation',
    description:
      'What pairs of faces have shown of an instrument, setup by setup, and whether it stands still.',
  });
