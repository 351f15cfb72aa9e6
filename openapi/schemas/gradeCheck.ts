import * as z from 'zod';
import {
  ClientId,
  Coordinate,
  Id,
  Instant,
  Moment,
  Name,
  Note,
  Point,
  page,
  Sigma,
  Verdict,
} from './primitives';
import { GroundShot } from './shot';
import { AnswerUnits } from './units';

const figure = z.number();
const maybe = z.number().nullable();

export const GradeShotInput = z
  .strictObject({
    clientId: ClientId,
    layer: Name,
    setup: z.string().min(1).max(128).optional().meta({ description: 'clientId or id of the setup.' }),
    shot: GroundShot.optional(),
    position: z
      .strictObject({ easting: Coordinate, northing: Coordinate, elevation: Coordinate })
      .optional()
      .meta({ description: 'Grid coordinates of the ground.' }),
    geodetic: z
      .strictObject({
        latitude: z.number().min(-90).max(90),
        longitude: z.number().min(-180).max(360),
        ellipsoidalHeight: Coordinate,
        datum: z.string().max(80),
        epoch: z.number().optional(),
        geoidModel: z.string().max(80).optional(),
      })
      .optional(),
    sigma: Sigma.optional().meta({ description: 'Of a position; a polar shot has its own.' }),
    observedAt: Instant,
  })
  .superRefine((item, context) => {
    const given = [item.shot, item.position, item.geodetic].filter((part) => part !== undefined).length;
    if (given !== 1) {
      const code = given === 0 ? 'one_of_required' : 'mutually_exclusive';
      const message = 'A grade shot carries exactly one of shot, position and geodetic.';
      context.addIssue({ code: 'custom', path: [], message, params: { code } });
    } else if (item.shot && item.setup === undefined) {
      const message = 'A polar shot needs the setup it was taken from.';
      context.addIssue({ code: 'custom', path: ['setup'], message, params: { code: 'required' } });
    } else if (item.shot && item.sigma) {
      const message = 'shot and sigma: a polar shot has its σ from its setup and instrument.';
      context.addIssue({ code: 'custom', path: ['sigma'], message, params: { code: 'mutually_exclusive' } });
    }
  })
  .meta({ id: 'GradeShotInput' });

export const GradeCheck = z
  .object({
    id: Id,
    clientId: z.string(),
    layer: z.string(),
    layerVersion: z.int(),
    observedAt: Moment,
    point: Point,
    designElevation: maybe.meta({ description: 'The surface; null outside of it.' }),
    layerElevation: maybe.meta({ description: 'The surface plus the layer’s offset.' }),
    finishElevation: maybe.meta({ description: 'Only where the surface is the finish.' }),
    deviation: maybe.meta({ description: 'Ground minus layer, vertical: positive = high = cut.' }),
    deviationNormal: maybe,
    label: z.string().nullable().meta({ example: 'C 0.03' }),
    standardDeviation: maybe,
    verdict: Verdict,
    reasons: z.array(Note),
    conformanceProbability: maybe,
    independent: z.boolean().meta({ description: 'False where the same setup guided the machine there.' }),
    tolerance: z.object({ below: figure, above: figure }),
    station: maybe,
    offset: maybe,
    surface: z.object({ id: Id, sha256: z.string() }),
    setupId: Id.nullable(),
    void: Note.nullable().meta({
      description:
        'Why it does not count any more: its setup was withdrawn, refitted or found wrong. Null where it stands, and in receipts, which tell how it came in.',
    }),
    uploadId: Id,
    units: AnswerUnits,
  })
  .meta({ id: 'GradeCheck' });

export const GradeCheckPage = page('GradeCheckPage', GradeCheck);

export const LayerSummary = z
  .object({
    layer: z.string(),
    layerVersion: z.int(),
    offset: figure,
    tolerance: z.object({ below: figure, above: figure, citation: z.string().nullable() }),
    count: z
      .int()
      .meta({ description: 'Checks on the surface that count: void and unplaced ones are beside it.' }),
    mean: maybe.meta({ description: 'Bias: positive = high.' }),
    standardDeviation: maybe.meta({ description: 'n − 1.' }),
    rmse: maybe.meta({ description: 'About zero.' }),
    withinTolerance: z.int(),
    percentWithinLimits: maybe.meta({
      description:
        'By quality index (FHWA T 5080.12); an indication unless the points were drawn at random. Null under three.',
    }),
    cutVolume: maybe.meta({ description: 'Null without a boundary.' }),
    fillVolume: maybe,
    verdicts: z.object({ pass: z.int(), hold: z.int(), fail: z.int() }),
    notCounted: z.object({ outside: z.int(), notInForce: z.int() }).meta({
      description:
        'notInForce: the setup was not in force then, or was withdrawn, refitted or found wrong since.',
    }),
    label: z.string().nullable(),
    verdict: Verdict,
    reasons: z.array(Note),
    radio: z.string(),
    units: AnswerUnits,
  })
  .meta({ id: 'LayerSummary' });
