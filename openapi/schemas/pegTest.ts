import * as z from 'zod';
import { ClientId, Id, Instant, Moment, Name, Note, page, Text, Verdict } from './primitives';
import { AnswerUnits } from './units';

/** Staff readings beyond this are millimetres, or a slipped point. */
export const Reading = z.number().min(-50).max(50);
export const SightLength = z.number().gt(0).max(2000);

const Standing = z.strictObject({
  readingA: Reading,
  distanceA: SightLength,
  readingB: Reading,
  distanceB: SightLength,
});

export const PegTestInput = z
  .strictObject({
    clientId: ClientId,
    instrument: Name,
    observedAt: Instant,
    setups: z.array(Standing).min(2).max(20).meta({
      description:
        'Standings of the level: from the middle of the pegs A and B, and from beside one of them. Repeats may follow; they tell the spread.',
    }),
    limitMmPerM: z.number().gt(0).max(10).optional().meta({
      description: 'Largest collimation; 0.1, which is 5 mm over 50 m, by default (common practice).',
    }),
    note: Text.optional(),
  })
  .meta({
    id: 'PegTestInput',
    example: {
      clientId: 'peg-0412',
      instrument: 'LV-1',
      observedAt: '2031-04-12T06:50:00-06:00',
      setups: [
        { readingA: 1.481, distanceA: 25, readingB: 1.233, distanceB: 25 },
        { readingA: 1.507, distanceA: 3, readingB: 1.262, distanceB: 47 },
      ],
    },
  });

const figure = z.number();

export const PegTest = z
  .object({
    id: Id,
    clientId: z.string(),
    instrument: z.string(),
    observedAt: Moment,
    verdict: Verdict,
    reasons: z.array(Note),
    heightDifference: figure.meta({ description: 'Peg B above peg A.' }),
    collimation: z
      .object({
        mmPerM: figure.meta({ description: 'Positive where readings are too high.' }),
        arcsec: figure,
        sigmaMmPerM: figure,
        sigmaArcsec: figure,
      })
      .meta({ description: 'Of the line of sight; curvature and refraction are taken off before.' }),
    limitMmPerM: figure,
    fit: z
      .object({ sigma0: figure, degreesOfFreedom: z.int(), passed: z.boolean() })
      .meta({ description: 'Of the standings among each other; two of them test nothing.' }),
    adjustTo: z.object({ staff: z.enum(['A', 'B']), read: figure, wanted: figure }).meta({
      description: 'The farther staff of the last standing: what it read, and what it should read.',
    }),
    setups: z.array(z.object(Standing.shape)),
    note: z.string().nullable(),
    uploadId: Id,
    units: AnswerUnits,
  })
  .meta({ id: 'PegTest' });

export const PegTestPage = page('PegTestPage', PegTest);
