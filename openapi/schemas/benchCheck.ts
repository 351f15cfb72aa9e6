import * as z from 'zod';
import {
  ClientId,
  Coordinate,
  Id,
  Instant,
  Moment,
  Name,
  Note,
  PositiveLength,
  page,
  Sha256,
  Verdict,
} from './primitives';
import { AnswerUnits } from './units';

const figure = z.number();
const maybe = z.number().nullable();

export const Edge = z
  .enum(['left', 'right', 'centre'])
  .meta({ id: 'Edge', description: 'Seen from the seat.' });

export const BenchCheckInput = z
  .strictObject({
    clientId: ClientId,
    machine: Name,
    setup: z.string().min(1).max(128).optional(),
    benchmark: Name,
    edge: Edge,
    elevations: z
      .array(Coordinate)
      .min(1)
      .max(100)
      .meta({ description: 'Repeats of the cutting edge, offset excluded.' }),
    layer: Name.optional(),
    surfaceSha256: Sha256.optional(),
    activeOffset: z
      .number()
      .min(-1e4)
      .max(1e4)
      .optional()
      .meta({ description: 'Signed as the layer’s offset.' }),
    tolerance: PositiveLength,
    correctionAppliedFor: z.string().max(128).optional().meta({
      description: 'clientId or id of the bench check whose correction was put in.',
    }),
    observedAt: Instant,
  })
  .meta({
    id: 'BenchCheckInput',
    example: {
      clientId: 'dz3-0412-1',
      machine: 'DZ-3',
      benchmark: 'BM-2',
      edge: 'left',
      elevations: [412.48, 412.48, 412.49],
      tolerance: 0.05,
      observedAt: '2031-04-12T08:05:00-06:00',
    },
  });

export const BenchCheck = z
  .object({
    id: Id,
    clientId: z.string(),
    machine: z.string(),
    setupId: Id.nullable(),
    benchmark: z.string(),
    benchmarkVersion: z.int(),
    edge: Edge,
    observedAt: Moment,
    knownElevation: figure,
    readElevation: figure,
    readings: z.int(),
    spread: maybe.meta({ description: 'Largest minus smallest repeat; null for a single reading.' }),
    difference: figure.meta({ description: 'Read minus known: negative where the edge reads low.' }),
    correction: maybe.meta({
      description:
        'To add to the edge’s height, once the setup has proved the benchmark. Null where none is offered: within the tolerance, for a gross error, where the difference is an offset, or where the check cannot speak for the blade.',
    }),
    tolerance: figure,
    layer: z
      .string()
      .nullable()
      .meta({ description: 'As named, or as the setup was released to the machine for.' }),
    layerOffset: maybe.meta({ description: 'The layer’s own, which the machine’s must be.' }),
    activeOffset: maybe,
    correctionAppliedFor: z.string().nullable(),
    verdict: Verdict,
    reasons: z.array(Note),
    instruction: z.string(),
    cautions: z.array(z.string()),
    void: Note.nullable().meta({
      description:
        'Why it does not count any more: its setup was withdrawn, refitted or found wrong. Null where it stands, and in receipts, which tell how it came in.',
    }),
    uploadId: Id,
    units: AnswerUnits,
  })
  .meta({ id: 'BenchCheck' });

export const BenchCheckPage = page('BenchCheckPage', BenchCheck);
