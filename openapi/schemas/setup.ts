import * as z from 'zod';
import { Identification } from './identification';
import { Id, Moment, Name, Note, page, Sha256, Text, Verdict } from './primitives';
import {
  Backsight,
  CheckOutcome,
  DirectionSets,
  FaceErrors,
  Geometry,
  Occupied,
  Reductions,
} from './setupDetail';
import { AnswerUnits } from './units';

const figure = z.number();
const maybe = z.number().nullable();

export const SetupCheckTarget = z
  .object({
    target: z.string(),
    role: z
      .enum(['independent', 'drift'])
      .meta({ description: 'A mark of the fit shows drift, not independence.' }),
    status: z.enum(['trusted', 'suspect', 'quarantined']),
    published: z.object({ easting: figure, northing: figure, elevation: maybe }),
    shots: z.array(z.string()),
    difference: z.object({ easting: figure, northing: figure, elevation: maybe }).meta({
      description: 'Polar position minus published control.',
    }),
    uncertainty: z
      .object({ horizontal: figure, vertical: maybe })
      .meta({ description: 'One standard deviation, u.' }),
    tolerance: z.object({ horizontal: figure, vertical: figure }),
    horizontal: CheckOutcome,
    vertical: CheckOutcome.nullable(),
  })
  .meta({ id: 'SetupCheckTarget' });

const measured = (description: string) =>
  z.object({ value: figure, standardDeviation: figure }).meta({ description });

export const SetupDrift = z
  .object({
    marks: z.array(z.string()).meta({ description: 'Marks of the fit that were shot again.' }),
    easting: measured('How the instrument has shifted.').nullable(),
    northing: measured('How the instrument has shifted.').nullable(),
    height: measured('How the instrument has risen.').nullable(),
    orientationArcsec: measured('How its circle has turned, clockwise.'),
    test: z.object({ value: figure, critical: figure, degreesOfFreedom: z.int() }).meta({
      description: 'Of the whole drift against χ² at 99 %.',
    }),
    significant: z.boolean(),
    text: z.string(),
    action: z.string().optional(),
  })
  .meta({
    id: 'SetupDrift',
    description:
      'How the instrument stands against the fit: later minus first. A shift is told by two marks or more; with one the instrument is taken to stand on its place.',
  });

export const SetupCheck = z
  .object({
    id: Id,
    clientId: z
      .string()
      .nullable()
      .meta({ description: 'Null for the check shots of the setup’s own upload.' }),
    setupId: Id,
    purpose: z.enum(['check', 'closing']),
    observedAt: Moment,
    agreed: z.boolean(),
    targets: z.array(SetupCheckTarget),
    drift: SetupDrift.nullable().meta({
      description:
        'Null where no mark of the fit was shot again, and for checks from before it was computed.',
    }),
    setupVerdict: Verdict.meta({ description: 'The setup’s verdict with this check.' }),
    carriedFrom: Id.nullable().meta({
      description: 'The check that this is, where a refit judged its shots again; null as it came in.',
    }),
    units: AnswerUnits,
  })
  .meta({ id: 'SetupCheck' });

export const SetupTarget = z
  .object({
    target: z.string().nullable(),
    used: z.boolean(),
    shots: z.array(z.string()).meta({ description: 'clientIds of its shots: what a refit leaves out.' }),
    purpose: z.enum(['orient', 'check', 'closing']),
    status: z.enum(['trusted', 'suspect', 'quarantined']).nullable(),
    published: z
      .object({ easting: figure, northing: figure, elevation: maybe })
      .nullable()
      .meta({ description: 'Control as it was used; null for a stray, which hit none.' }),
    residual: z.object({ easting: maybe, northing: maybe, elevation: maybe }).meta({
      description: 'Polar position from the fitted station minus published control.',
    }),
    miss: z.object({ across: maybe, along: maybe, up: maybe }).meta({
      description:
        'What the readings miss by as lengths at the mark, observed minus fitted: sideways (right is plus), along the sight, up.',
    }),
    without: z.object({ horizontal: figure, vertical: maybe }).nullable().meta({
      description: 'How the station moves without this mark; null where the rest does not determine it.',
    }),
    observations: z.array(
      z
        .object({
          kind: z.enum(['direction', 'zenith', 'distance']),
          set: z.int(),
          faces: z.enum(['both', 'left', 'right']),
          residual: figure.meta({ description: 'Reduced observed minus fitted.' }),
          unit: z.enum(['arcsec', 'm', 'ft', 'ftUS']),
          standardised: maybe.meta({ description: 'Null where no other observation controls it.' }),
          redundancy: figure,
          minimalDetectable: maybe,
        })
        .meta({ id: 'SetupObservation' }),
    ),
  })
  .meta({ id: 'SetupTarget' });

export const Explanation = z
  .object({
    fault: z.enum([
      'none',
      'distanceConstant',
      'distanceScale',
      'targetsSwapped',
      'targetMoved',
      'heightOfTargetOrMark',
      'singleFace',
      'stationMoved',
      'instrumentHeight',
      'wrongFoot',
      'instrumentMoved',
      'unexplained',
    ]),
    subject: z.string().nullable().meta({ description: 'The mark, or the two marks, that it concerns.' }),
    size: maybe.meta({
      description:
        'Distances: too long is plus. Heights: the shots above the published elevation is plus. A shift has no sign.',
    }),
    unit: z.string().nullable(),
    weight: figure,
    text: z.string(),
    confirm: z.string().meta({ description: 'The one shot that would settle it.' }),
  })
  .meta({
    id: 'Explanation',
    description:
      'What would explain the residuals, heaviest first: single faults, each tried in the same adjustment. Weights sum to 1.',
  });

export const Release = z
  .object({
    machine: z.string().nullable(),
    layer: z.string().nullable(),
    layerVersion: z.int().nullable(),
    surfaceSha256: z.string().nullable(),
    offset: maybe,
    note: z.string().nullable(),
    releasedAt: Moment,
    releasedBy: z.string(),
    validUntil: Moment,
  })
  .meta({ id: 'Release' });

export const SetupStatus = z.enum(['computed', 'released', 'withdrawn', 'expired', 'superseded']).meta({
  id: 'SetupStatus',
});

export const Setup = z
  .object({
    id: Id,
    clientId: z.string(),
    station: z.string(),
    method: z.enum(['resection', 'identify', 'backsight']),
    instrument: z.string(),
    toleranceClass: z.string(),
    observedAt: Moment,
    status: SetupStatus,
    verdict: Verdict,
    verdicts: z.object({ horizontal: Verdict, vertical: Verdict }),
    reasons: z.array(Note).meta({ description: 'Why the verdict is what it is, and what was not checked.' }),
    notes: z
      .array(Note)
      .meta({ description: 'What was assumed and what is worth knowing; no verdict hangs on it.' }),
    radio: z.string().meta({ description: 'One line to read out, beginning with the act.' }),
    cautions: z.array(z.string()),
    units: AnswerUnits,
    position: z.object({ easting: figure, northing: figure, elevation: maybe }).meta({
      description: 'elevation is the ground mark’s; null where no mark is occupied.',
    }),
    instrumentElevation: maybe.meta({ description: 'The tilting axis.' }),
    instrumentHeight: maybe,
    orientation: maybe.meta({
      description: 'Azimuth of the circle’s zero, degrees; null where no direction was read.',
    }),
    standardDeviations: z.object({
      easting: figure,
      northing: figure,
      elevation: maybe,
      orientationArcsec: maybe,
    }),
    errorEllipse: z
      .object({ semiMajor: figure, semiMinor: figure, azimuth: figure, confidence: z.literal(0.95) })
      .meta({ description: 'azimuth of the major axis from grid north, 0 to 180°.' }),
    tolerance: z
      .object({ horizontal: figure, vertical: figure })
      .meta({ description: 'What targets and checks may show, as the class says.' }),
    accuracyAtWork: z
      .object({
        radius: figure,
        horizontal: maybe,
        vertical: maybe,
        confidence: z.literal(0.95),
        limits: z.object({ horizontal: figure, vertical: figure }),
      })
      .meta({
        description: '1.96 standard deviations of a point at the class’ working radius, beside its limits.',
      }),
    fit: z.object({
      sigma0: figure,
      degreesOfFreedom: z.int(),
      chiSquare: z.object({ value: figure, lower: figure, upper: figure, passed: z.boolean() }),
      scaled: z.boolean().meta({ description: 'Standard deviations were multiplied by sigma0.' }),
      dataSnooping: z.object({ criticalW: figure, delta0: figure, alpha: figure, power: figure }).meta({
        description:
          'Beyond |w| = criticalW a reading is an outlier (α, two-sided); minimalDetectable is found with that power (Baarda).',
      }),
      converged: z.boolean(),
      iterations: z.int(),
    }),
    geometry: Geometry,
    occupied: Occupied.nullable(),
    backsights: z.array(Backsight),
    reductions: Reductions,
    faceErrors: FaceErrors.nullable().meta({ description: 'Null where no set has both faces.' }),
    directionSets: DirectionSets.nullable().meta({
      description: 'Null of fewer than two sets with two reflectors in common.',
    }),
    targets: z.array(SetupTarget),
    checks: z.array(SetupCheck),
    explanations: z.array(Explanation),
    identification: Identification.nullable().meta({
      description: 'Null where the shots named their targets.',
    }),
    release: Release.nullable().meta({ description: 'The last one given.' }),
    validUntil: Moment.nullable().meta({ description: 'When the longest of its releases runs out.' }),
    supersedes: Id.nullable(),
    supersededBy: Id.nullable(),
    excluded: z.array(z.object({ shot: z.string(), reason: z.string() })).meta({
      description: 'Shots that a refit left out; they stay visible.',
    }),
    submittedBy: z.string(),
    provenance: z.object({
      method: z.string().meta({ description: 'Its page: /reference/methods/{method}.' }),
      version: z.string(),
      resultVersion: z.int(),
      uploadId: Id,
      instrument: z.object({ name: z.string(), calibration: z.int() }),
      control: z.array(z.object({ name: z.string(), version: z.int() })),
      computedAt: Moment,
    }),
  })
  .meta({ id: 'Setup' });

export const SetupPage = page('SetupPage', Setup);

export const SetupWatch = z
  .object({
    setupId: Id,
    station: z.string(),
    status: SetupStatus,
    observedAt: Moment,
    validUntil: Moment.nullable(),
    lastAgreed: z.object({ checkId: Id, observedAt: Moment }).nullable(),
    reasons: z.array(Note).meta({ description: 'What the checks say of the setup as it stands now.' }),
    checks: z.array(SetupCheck),
    units: AnswerUnits,
  })
  .meta({ id: 'SetupWatch', description: 'The checks of a setup over time, oldest first.' });

export const RefitCreate = z
  .strictObject({
    exclude: z.array(z.string().min(1).max(128)).min(1).max(500).meta({ description: 'clientIds of shots.' }),
    reason: Text.min(1),
  })
  .meta({
    id: 'RefitCreate',
    example: { exclude: ['st-7/4', 'st-7/8'], reason: 'HT-102 was hit by the water truck.' },
  });

export const ReleaseCreate = z
  .strictObject({
    machine: Name.optional(),
    layer: Name.optional(),
    surfaceSha256: Sha256.optional(),
    offset: z.number().min(-1e4).max(1e4).optional().meta({
      description:
        'In the project’s length unit, signed as the layer’s; it must be the layer’s, which stands where none is sent.',
    }),
    validMinutes: z.int().min(5).max(20_160).optional(),
    releasedAt: z
      .string()
      .optional()
      .meta({ format: 'date-time', description: 'When it was released on site, where that was before now.' }),
    note: Text.min(1).optional(),
  })
  .meta({
    id: 'ReleaseCreate',
    example: { machine: 'DZ-3', layer: 'subgrade', offset: -0.5, validMinutes: 480 },
  });

export const WithdrawCreate = z
  .strictObject({ note: Text.min(1).optional() })
  .meta({ id: 'WithdrawCreate', example: { note: 'The tripod was bumped.' } });

export const Pointing = z
  .object({
    target: z.string(),
    kind: z.enum(['control', 'benchmark', 'target']),
    status: z.enum(['trusted', 'suspect', 'quarantined']),
    horizontal: maybe.meta({
      description: 'Face left, degrees; null where the setup has no orientation.',
    }),
    zenith: maybe.meta({ description: 'Face left, degrees; null where the point has no elevation.' }),
    slopeDistance: maybe.meta({ description: 'True slope distance.' }),
    horizontalDistance: figure.meta({ description: 'Ground distance.' }),
  })
  .meta({ id: 'Pointing' });

export const Pointings = z
  .object({ setupId: Id, targetHeight: figure, units: AnswerUnits, data: z.array(Pointing) })
  .meta({ id: 'Pointings', description: 'Turn-to values from a setup to every control point.' });

export const Acknowledgement = z
  .object({
    id: Id,
    machine: z.string(),
    setupId: Id,
    station: z.string(),
    text: z.string(),
    withdrawnBy: z.string().meta({ description: 'Who withdrew the setup.' }),
    withdrawnAt: Moment,
    reason: z.string().nullable().meta({ description: 'Why, as whoever withdrew it said.' }),
    openedAt: Moment,
    acknowledgedAt: Moment.nullable(),
    acknowledgedBy: z.string().nullable(),
    note: z.string().nullable(),
  })
  .meta({ id: 'Acknowledgement', description: 'A withdrawal that a machine’s crew has to answer.' });

export const AcknowledgementPage = page('AcknowledgementPage', Acknowledgement);

export const AcknowledgementAnswer = z
  .strictObject({ note: Text.optional() })
  .meta({ id: 'AcknowledgementAnswer', example: { note: 'DZ-3 parked at 10:42.' } });

export const Withdrawal = z
  .object({ setup: Setup, acknowledgements: z.array(Acknowledgement), caution: z.string() })
  .meta({ id: 'Withdrawal' });
