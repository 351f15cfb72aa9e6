import * as z from 'zod';
import { LevelLimit, StatedLevelLimit } from './levelLimit';
import { Coordinate, Id, Moment, PositiveLength, page, Sigma, Text, Title } from './primitives';
import { AnswerUnits, LengthUnit } from './units';

export const Frame = z
  .discriminatedUnion('kind', [
    z.strictObject({ kind: z.literal('local') }),
    z.strictObject({ kind: z.literal('projected'), crs: z.string().regex(/^EPSG:\d{4,6}$/) }),
    z.strictObject({ kind: z.literal('siteFit'), siteFitId: Id }),
  ])
  .meta({
    id: 'Frame',
    description: 'Where the project’s coordinates live. `local` is a site grid of its own.',
    example: { kind: 'local' },
  });

export const ToleranceClass = z
  .strictObject({
    name: Title,
    residual: z.strictObject({ horizontal: PositiveLength, vertical: PositiveLength }).meta({
      description: 'What targets and checks of a setup may show.',
    }),
    work: z
      .strictObject({ radius: PositiveLength, horizontal: PositiveLength, vertical: PositiveLength })
      .meta({ description: 'What the setup must be able to do at a distance, at 95 %.' }),
    checkRequired: z
      .boolean()
      .meta({ description: 'Whether an independent check must agree before a pass.' }),
    citation: Text.optional().meta({ description: 'The clause it comes from.' }),
  })
  .meta({
    id: 'ToleranceClass',
    example: {
      name: 'earthwork',
      residual: { horizontal: 0.03, vertical: 0.03 },
      work: { radius: 500, horizontal: 0.1, vertical: 0.05 },
      checkRequired: false,
      citation: 'common practice',
    },
  });

const settings = {
  toleranceClasses: z.array(ToleranceClass).min(1).max(50).optional().meta({
    description: 'The first is the project’s default. Classes of common practice by default.',
  }),
  combinedFactor: z.number().gt(0.99).lt(1.01).optional().meta({
    description: 'grid = ground × factor, horizontal only; 1 by default.',
    example: 0.99987,
  }),
  siteElevation: Coordinate.nullable().optional().meta({
    description:
      'Height above sea level, where elevations count from a datum of the site’s own: pressures are checked against it.',
  }),
  refraction: z
    .strictObject({ coefficient: z.number().min(-2).max(2), sigma: z.number().gt(0).max(2) })
    .optional()
    .meta({ description: 'Coefficient of refraction and its standard deviation; 0.13 ± 0.3 by default.' }),
  controlSigma: Sigma.optional().meta({ description: 'For control that states none.' }),
  positionSigma: Sigma.nullable().optional().meta({
    description: 'For grade shots by coordinates that state none; null judges them as read.',
  }),
  levelLimit: LevelLimit.nullable().optional().meta({
    description: 'What level runs may fail to close by; third order, 12 mm√km, where it is null.',
  }),
  setupValidMinutes: z
    .int()
    .min(5)
    .max(20_160)
    .optional()
    .meta({ description: 'How long a release holds.', example: 720 }),
  displayDecimals: z
    .int()
    .min(0)
    .max(4)
    .optional()
    .meta({ description: 'Decimals of labels such as C 0.12.', example: 2 }),
};

export const ProjectCreate = z
  .strictObject({ name: Title, lengthUnit: LengthUnit, frame: Frame, ...settings })
  .meta({
    id: 'ProjectCreate',
    example: { name: 'Wren Fork pad', lengthUnit: 'ft', frame: { kind: 'local' } },
  });

export const ProjectPatch = z
  .strictObject({ name: Title.optional(), ...settings })
  .meta({ id: 'ProjectPatch' });

export const Project = z
  .object({
    id: Id,
    name: z.string(),
    lengthUnit: LengthUnit,
    frame: Frame,
    toleranceClasses: z.array(ToleranceClass),
    combinedFactor: z.number(),
    siteElevation: z.number().nullable(),
    refraction: z.object({ coefficient: z.number(), sigma: z.number() }),
    controlSigma: Sigma,
    positionSigma: Sigma.nullable(),
    levelLimit: StatedLevelLimit,
    setupValidMinutes: z.int(),
    displayDecimals: z.int(),
    units: AnswerUnits,
    createdAt: Moment,
    updatedAt: Moment,
  })
  .meta({ id: 'Project' });

export const ProjectPage = page('ProjectPage', Project);
