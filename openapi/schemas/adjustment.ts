import * as z from 'zod';
import { ControlStatus } from './control';
import { JobStatus } from './job';
import { Id, Instant, Moment, Name, Note, page, Text, Title, Verdict } from './primitives';
import { AnswerUnits, LengthUnit } from './units';

const figure = z.number();
const maybe = z.number().nullable();

export const DatumKind = z.enum(['held', 'weighted', 'free']).meta({
  id: 'DatumKind',
  description:
    'held: fixed at their present coordinates. weighted: observed by their present coordinates with the published standard deviations. free: placed so that their corrections have the least sum of squares.',
});

/** Points named in one request. */
const MAX_NAMES = 5_000;

const ids = z.union([z.literal('all'), z.array(Id).max(2_000)]);

export const AdjustmentCreate = z
  .strictObject({
    name: Title.optional().meta({ description: 'The day and time by default.' }),
    setups: ids.meta({
      description:
        'Ids of setups, or `all`: those neither withdrawn nor superseded, and whose targets are known. A setup and its refit have the same shots: name one of them. Shots that a refit left out stay out; checks take part with the shots of their setup. Empty for a network of level runs alone.',
    }),
    levelRuns: ids.optional().meta({
      description:
        'Ids of level runs, or `all` that do not fail; none by default. Each is cut at the control points that it turned on.',
    }),
    roverPoints: ids.optional().meta({ description: 'Not available yet.' }),
    datum: z.strictObject({ kind: DatumKind, points: z.array(Name).min(1).max(MAX_NAMES).optional() }).meta({
      description:
        'What places the network: these points, by default all trusted ones that were seen. The others are found anew from the observations.',
    }),
    snooping: z
      .boolean()
      .default(true)
      .meta({ description: 'Take out observations with |w| above 3.29, the worst first.' }),
    since: Instant.optional().meta({ description: 'Only setups observed at or after it.' }),
    until: Instant.optional().meta({ description: 'Only setups observed before it.' }),
  })
  .meta({
    id: 'AdjustmentCreate',
    example: { name: 'Spring control', setups: 'all', datum: { kind: 'weighted' } },
  });

export const AdjustmentApply = z
  .strictObject({
    points: z
      .array(Name)
      .min(1)
      .max(MAX_NAMES)
      .optional()
      .meta({ description: 'Points that get a new version; by default all that were not held.' }),
    note: Text.min(1).optional().meta({ description: 'Required where the verdict is hold.' }),
    confirmMoves: z
      .boolean()
      .optional()
      .meta({ description: 'Needed where a point would move by more than a metre.' }),
  })
  .meta({ id: 'AdjustmentApply' });

const Coordinates = z.object({ easting: maybe, northing: maybe, elevation: maybe });
const Ellipse = z.object({
  semiMajor: figure,
  semiMinor: figure,
  azimuth: figure.meta({ description: 'Of the major axis from grid north, 0–180.' }),
  confidence: z.literal(0.95),
});
const CoordinateDatum = z.enum(['held', 'weighted', 'free', 'new']).meta({ id: 'CoordinateDatum' });

export const AdjustmentPoint = z
  .object({
    name: z.string(),
    version: z
      .int()
      .nullable()
      .meta({ description: 'Version in force when it was adjusted; null for a point that is no control.' }),
    status: ControlStatus.nullable(),
    datum: z.object({ horizontal: CoordinateDatum, vertical: CoordinateDatum }),
    ...Coordinates.shape,
    shift: Coordinates.meta({ description: 'Adjusted minus the version in force.' }),
    standardDeviations: z.object({ easting: figure, northing: figure, elevation: maybe }),
    errorEllipse: Ellipse.nullable().meta({ description: 'Null where the point was held.' }),
    checked: z.object({ horizontal: z.boolean().nullable(), vertical: z.boolean().nullable() }).meta({
      description:
        'Whether other observations would show an error in those that reach it; null where it was held or is not determined.',
    }),
  })
  .meta({ id: 'AdjustmentPoint' });

const OBSERVATION_UNITS = z.enum(['arcsec', 'ppm', 'unit', ...LengthUnit.options]).meta({
  id: 'ObservationUnit',
  description: '`unit` is a pure number: the coefficient of refraction.',
});

const ObservationKind = z
  .enum([
    ...(['direction', 'zenith', 'distance', 'levelDifference', 'position', 'baseline', 'control'] as const),
    ...(['instrumentCentring', 'instrumentHeight', 'targetCentring', 'targetHeight'] as const),
    ...(['refraction', 'collimation', 'verticalIndex', 'scale'] as const),
  ])
  .meta({
    id: 'ObservationKind',
    description:
      'The last eight are errors that repeats do not shrink: each is one unknown, held about its stated value.',
  });

export const AdjustmentObservation = z
  .object({
    number: z.int().meta({ description: 'Its place in the list.' }),
    kind: ObservationKind,
    setupId: Id.nullable(),
    setup: z.string().nullable().meta({ description: 'The setup’s clientId.' }),
    levelRunId: Id.nullable(),
    levelRun: z.string().nullable().meta({ description: 'The level run’s clientId.' }),
    from: z.string().nullable(),
    to: z.string().nullable(),
    component: z
      .enum(['easting', 'northing', 'elevation', 'along', 'across'])
      .nullable()
      .meta({ description: 'Of a centring, along and across the ray.' }),
    set: z.int().nullable().meta({
      description: 'Sets of checks are counted on behind those of the setup itself.',
    }),
    shots: z.array(z.string()).meta({ description: 'clientIds of the shots that it is the mean of.' }),
    unit: OBSERVATION_UNITS,
    standardDeviation: figure.meta({ description: 'A priori.' }),
    residual: figure.meta({
      description: 'Observed minus adjusted; of a removed one, how it lies beside the others.',
    }),
    redundancy: maybe.meta({ description: '0–1: the share of an error that shows in its own residual.' }),
    standardised: maybe.meta({ description: 'w; null where nothing else controls it or it was removed.' }),
    minimalDetectable: maybe,
    effect: z
      .object({ point: z.string(), easting: figure, northing: figure, elevation: figure })
      .nullable()
      .meta({ description: 'What an error of that size would do, undetected, to the point it moves most.' }),
    biasToNoise: maybe,
    removed: z.boolean(),
  })
  .meta({ id: 'AdjustmentObservation' });

export const AdjustmentObservationPage = page('AdjustmentObservationPage', AdjustmentObservation);

const Removed = z.object({
  observation: z.int().meta({ description: 'Its number in the list of observations.' }),
  standardised: figure.meta({ description: 'w when it was taken out, the largest of all then.' }),
  error: figure.meta({ description: 'Its error as the others tell it.' }),
  errorSigma: figure,
  alternatives: z.array(z.int()).meta({
    description:
      'Numbers of observations whose error would have shown in the same way: it may be one of them.',
  }),
  unit: OBSERVATION_UNITS,
  text: z.string(),
});

export const AdjustmentResult = z
  .object({
    verdict: Verdict,
    reasons: z.array(Note),
    notes: z.array(Note),
    fit: z.object({
      sigma0: figure,
      degreesOfFreedom: z.int(),
      unknowns: z.int(),
      observations: z.int(),
      chiSquare: z.object({ value: figure, lower: figure, upper: figure, passed: z.boolean() }),
      scaled: z.boolean(),
      converged: z.boolean(),
      iterations: z.int(),
    }),
    datum: z.object({
      kind: DatumKind,
      free: z.array(z.enum(['easting', 'northing', 'elevation', 'rotation'])).meta({
        description: 'Movements that nothing observed: settled by the free points.',
      }),
      held: z.int().meta({ description: 'Coordinates held.' }),
      weighted: z.int().meta({ description: 'Coordinates weighted.' }),
    }),
    points: z.array(AdjustmentPoint),
    setups: z.array(
      z.object({
        id: Id,
        clientId: z.string(),
        station: z.string(),
        ...Coordinates.shape,
        orientation: maybe,
        errorEllipse: Ellipse,
      }),
    ),
    removed: z.array(Removed),
    leftOut: z.array(z.object({ setupId: Id.nullable(), shots: z.array(z.string()), text: z.string() })),
    provenance: z.object({
      method: z.string(),
      version: z.string(),
      computedAt: Moment,
      control: z.array(z.object({ name: z.string(), version: z.int() })),
      setups: z.array(z.object({ id: Id, resultVersion: z.int() })),
      levelRuns: z.array(Id),
    }),
  })
  .meta({
    id: 'AdjustmentResult',
    description: 'Setups by their tilting axis: `elevation` there is the axis’. All of it is a trial run.',
  });

const summary = {
  id: Id,
  name: z.string(),
  job: z.object({ id: Id, status: JobStatus }),
  verdict: Verdict.nullable().meta({ description: 'Null until there is a result.' }),
  applied: z
    .object({ at: Moment, by: z.string(), note: z.string().nullable() })
    .nullable()
    .meta({ description: 'When its coordinates became control.' }),
  createdBy: z.string(),
  createdAt: Moment,
};

export const Adjustment = z
  .object({
    ...summary,
    request: z.object({
      setups: z.union([z.literal('all'), z.array(Id)]),
      levelRuns: z.union([z.literal('all'), z.array(Id)]).nullable(),
      datum: z.object({ kind: DatumKind, points: z.array(z.string()).nullable() }),
      snooping: z.boolean(),
      since: Moment.nullable(),
      until: Moment.nullable(),
    }),
    result: AdjustmentResult.nullable(),
    cautions: z.array(z.string()),
    units: AnswerUnits,
  })
  .meta({ id: 'Adjustment' });

export const AdjustmentPage = page('AdjustmentPage', z.object(summary).meta({ id: 'AdjustmentSummary' }));

export const AdjustmentApplied = z
  .object({
    adjustmentId: Id,
    points: z.array(
      z.object({
        name: z.string(),
        version: z.int().meta({ description: 'The new version.' }),
        shift: Coordinates,
      }),
    ),
    unchanged: z
      .array(z.string())
      .meta({ description: 'Held, or found where it was to a tenth of a micrometre.' }),
    cautions: z.array(z.string()),
    units: AnswerUnits,
  })
  .meta({ id: 'AdjustmentApplied' });

const Test = z.object({
  value: figure,
  critical: figure,
  degreesOfFreedom: z
    .int()
    .meta({ description: '0 where there was nothing to test; `passed` is then true.' }),
  passed: z.boolean(),
});

export const AdjustmentComparison = z
  .object({
    earlier: Id,
    later: Id,
    text: z.string(),
    action: z.string().nullable(),
    congruence: Test.meta({ description: 'All common points at once.' }),
    remaining: Test.meta({ description: 'The points that stayed, after those that moved were taken out.' }),
    moved: z.array(z.string()).meta({ description: 'In the order in which they were found.' }),
    points: z.array(
      z.object({
        name: z.string(),
        moved: z.boolean(),
        displacement: Coordinates.meta({
          description: 'Later minus earlier, in the datum of the points that stayed.',
        }),
        errorEllipse: Ellipse,
        elevationSigma: maybe,
        test: z.object({ value: figure, critical: figure, degreesOfFreedom: z.int(), probability: figure }),
        text: z.string(),
      }),
    ),
    onlyEarlier: z.array(z.string()),
    onlyLater: z.array(z.string()),
    units: AnswerUnits,
  })
  .meta({ id: 'AdjustmentComparison' });
