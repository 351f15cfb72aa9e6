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

const maybe = z.number().nullable();

export const ControlStatusAct = z
  .object({
    by: z.object({
      kind: z.enum(['person', 'key', 'job']).meta({ description: 'job: the hub itself.' }),
      name: z.string(),
    }),
    at: Moment,
    text: z.string().meta({ description: 'Why, in the words of whoever did it.' }),
    lastGoodAt: Moment.nullable().meta({
      description: 'Where the hub suspected it: when it was last seen in its place; null where it never was.',
    }),
  })
  .meta({ id: 'ControlStatusAct' });

export const ControlHealth = z
  .object({
    finding: z.enum(['steady', 'moved', 'doubtful', 'unknown']).meta({
      description:
        'moved: two setups, or one and a level run, at least show it elsewhere, while the other marks agree and nothing else explains it as well. doubtful: something shows it elsewhere, which cannot be told yet from a misreading or from another mark that moved. unknown: nothing tells where it stands, or not closely enough to show what a mark may miss by in the class it is used for.',
    }),
    text: z.string(),
    action: z.string().optional(),
    displacement: z
      .object({
        easting: z.number(),
        northing: z.number(),
        elevation: maybe,
        horizontal: z.number(),
        azimuth: z.number().meta({ description: 'Of the horizontal displacement, degrees from grid north.' }),
        standardDeviations: z.object({ easting: z.number(), northing: z.number(), elevation: maybe }),
      })
      .nullable()
      .meta({
        description:
          'Where it stands minus where it was published, by the other marks: in all setups, or in those since it moved.',
      }),
    test: z.object({ value: z.number(), critical: z.number(), degreesOfFreedom: z.int() }).nullable().meta({
      description:
        '∇ᵀQ⁻¹∇ of the displacement against χ²: under one look in a hundred at control that stands finds anything.',
    }),
    movedBetween: z.object({ after: Moment.nullable(), before: Moment }).nullable().meta({
      description:
        'When it was last seen in its place by what could have seen it off, if ever, and first seen elsewhere.',
    }),
    sightings: z
      .array(
        z.object({
          setupId: Id.nullable(),
          levelRunId: Id.nullable(),
          station: z.string().meta({ description: 'Of the setup; the clientId of a level run.' }),
          observedAt: Moment,
          crew: z
            .string()
            .nullable()
            .meta({ description: 'Who or what sent the setup in; null for a level run.' }),
          moved: z.boolean().meta({ description: 'It agrees with the mark having moved.' }),
          off: z.boolean().meta({
            description: 'By itself it shows the mark farther off than chance does.',
          }),
          difference: z
            .object({ easting: z.number(), northing: z.number(), elevation: maybe })
            .nullable()
            .meta({
              description:
                'Place of the mark by all the others minus published; null where they do not determine it.',
            }),
          standardDeviations: z
            .object({ easting: z.number(), northing: z.number(), elevation: maybe })
            .nullable(),
        }),
      )
      .meta({
        description:
          'Setups that are heard on it, the newest 40 at most, and level runs between it and other marks that they saw; newest first.',
      }),
  })
  .meta({
    id: 'ControlHealth',
    description:
      'What setups show of a control point in its present version, all of them in one adjustment, its published standard deviation counted once. Setups that a fault of their own explains are not heard.',
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
    statusAct: ControlStatusAct.nullable().meta({
      description: 'Who set the status last, and why; null as long as nobody did.',
    }),
    units: AnswerUnits,
    updatedAt: Moment,
  })
  .meta({ id: 'ControlPoint' });

export const ControlPointSheet = ControlPoint.extend({ health: ControlHealth }).meta({
  id: 'ControlPointSheet',
});

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
