import * as z from 'zod';
import { Coordinate, Id, Moment, Name, page, Sigma, Text } from './primitives';
import { ProblemItem } from './problem';
import { AnswerUnits, ConfirmUnits, LengthUnits } from './units';

export const ControlKind = z.enum(['control', 'benchmark', 'target']).meta({ id: 'ControlKind' });
export const ControlStatus = z.enum(['trusted', 'suspect', 'quarantined']).meta({
  id: 'ControlStatus',
  description: 'A suspect point takes part but proves nothing; a quarantined one takes no part at all.',
});

export const ControlPointInput = z
  .strictObject({
    name: Name,
    easting: Coordinate,
    northing: Coordinate,
    elevation: Coordinate.optional(),
    sigma: Sigma.optional(),
    kind: ControlKind.default('control'),
    description: Text.optional(),
  })
  .meta({ id: 'ControlPointInput' });

/** Points of one submission, and rows of one table. */
export const MAX_CONTROL_POINTS = 5_000;

export const ControlSubmission = z
  .strictObject({
    units: LengthUnits,
    confirmUnits: ConfirmUnits.meta({
      description:
        'Needed where a submission is in the other foot than the project’s frame, or where points would move by more than a metre.',
    }),
    points: z.array(ControlPointInput).min(1).max(MAX_CONTROL_POINTS),
  })
  .meta({
    id: 'ControlSubmission',
    example: {
      units: { length: 'ft' },
      points: [{ name: 'HT-104', easting: 5012.41, northing: 8120.77, elevation: 412.6, kind: 'target' }],
    },
  });

const AdjustmentId = Id.nullable().meta({
  description: 'The adjustment that the version comes from; null where it was sent in.',
});

export const ControlPoint = z
  .object({
    name: z.string(),
    kind: ControlKind,
    status: ControlStatus,
    easting: z.number(),
    northing: z.number(),
    elevation: z.number().nullable(),
    sigma: Sigma,
    sigmaSource: z.enum(['stated', 'projectDefault']),
    description: z.string().nullable(),
    adjustmentId: AdjustmentId,
    version: z.int(),
    units: AnswerUnits,
    updatedAt: Moment,
  })
  .meta({ id: 'ControlPoint' });

export const ControlReceipt = z
  .object({
    counts: z.object({ created: z.int(), revised: z.int(), unchanged: z.int(), refused: z.int() }),
    points: z.array(
      z.object({
        pointer: z.string(),
        name: z.string(),
        outcome: z.enum(['created', 'revised', 'unchanged']),
        version: z.int(),
      }),
    ),
    refused: z.array(ProblemItem),
  })
  .meta({ id: 'ControlReceipt', description: 'What became of each point.' });

export const ControlPointPage = page('ControlPointPage', ControlPoint);

export const ControlPointPatch = z.strictObject({ status: ControlStatus, note: Text.min(1) }).meta({
  id: 'ControlPointPatch',
  example: { status: 'quarantined', note: 'Stake leans; hit by the water truck.' },
});

export const ControlHistory = z
  .object({
    name: z.string(),
    status: ControlStatus,
    versions: z.array(
      z.object({
        version: z.int(),
        easting: z.number(),
        northing: z.number(),
        elevation: z.number().nullable(),
        sigma: Sigma,
        sigmaSource: z.enum(['stated', 'projectDefault']),
        kind: ControlKind,
        description: z.string().nullable(),
        adjustmentId: AdjustmentId,
        createdAt: Moment,
        createdBy: z.string(),
      }),
    ),
    residuals: z
      .array(
        z.object({
          setupId: Id,
          station: z.string(),
          observedAt: Moment,
          version: z.int().meta({ description: 'Version of the point that the setup used.' }),
          residual: z.object({
            easting: z.number().nullable(),
            northing: z.number().nullable(),
            elevation: z.number().nullable(),
          }),
        }),
      )
      .meta({
        description: 'Polar position minus published coordinates, setup by setup, newest first, 200 at most.',
      }),
    units: AnswerUnits,
  })
  .meta({ id: 'ControlHistory' });
