import * as z from 'zod';
import { ClientId, Instant, Name } from './primitives';

/** A number, or text where the unit is `dms`. */
const Angle = z
  .union([z.number().min(-1e4).max(1e4), z.string().max(40)])
  .meta({ description: 'A number, or text where units.angle is dms.', example: '124-30-15.2' });

const millimetres = z.number().min(-1000).max(1000);
const sigmaMillimetres = z.number().min(0).max(100);

const readings = {
  face: z.enum(['left', 'right']),
  set: z.int().min(1).max(1000).default(1).meta({ description: 'Faces are meaned within a set.' }),
  compensator: z.enum(['on', 'off']).default('on'),
  horizontal: Angle.optional(),
  zenith: Angle.optional(),
  slopeDistance: z.number().gt(0).max(1e6).optional(),
  targetHeight: z.number().min(-100).max(100).optional(),
  prismConstantMm: millimetres.optional(),
  prismConstantAppliedMm: millimetres.optional(),
  appliedPpm: z.number().min(-1000).max(1000).optional(),
  distanceMode: z.enum(['prism', 'reflectorless']).default('prism'),
  targetCentringSigmaMm: sigmaMillimetres.optional(),
  targetHeightSigmaMm: sigmaMillimetres.optional(),
};

type Readings = z.output<z.ZodObject<typeof readings>>;

/** The rules that tie the fields of a shot together. */
function checkReadings(shot: Readings, context: z.core.$RefinementCtx): void {
  const issue = (field: string, code: string, message: string) =>
    context.addIssue({ code: 'custom', path: [field], message, params: { code } });
  const distance = shot.slopeDistance !== undefined;
  if (shot.horizontal === undefined && shot.zenith === undefined && !distance) {
    issue('horizontal', 'reading_required', 'The shot has neither horizontal, zenith nor slopeDistance.');
  }
  if ((shot.zenith !== undefined || distance) && shot.targetHeight === undefined) {
    issue(
      'targetHeight',
      'target_height_required',
      'A zenith angle or a distance was read, but no targetHeight.',
    );
  }
  if (!distance) return;
  if (shot.prismConstantMm === undefined) {
    issue(
      'prismConstantMm',
      'prism_state_required',
      'A distance was read, but its prism constant is not said.',
    );
  }
  if (shot.prismConstantAppliedMm === undefined) {
    issue(
      'prismConstantAppliedMm',
      'prism_state_required',
      'The prism constant already applied is not said.',
    );
  }
  if (shot.appliedPpm === undefined) {
    issue('appliedPpm', 'ppm_state_required', 'The ppm already applied is not said.');
  }
  const constants = (shot.prismConstantMm ?? 0) !== 0 || (shot.prismConstantAppliedMm ?? 0) !== 0;
  if (shot.distanceMode === 'reflectorless' && constants) {
    issue('prismConstantMm', 'prism_state_conflict', 'A reflectorless distance has no prism constant.');
  }
}

export const Shot = z
  .strictObject({
    clientId: ClientId,
    target: Name.nullable().meta({ description: 'The control point; null in `identify`.' }),
    purpose: z.enum(['orient', 'check', 'closing']).default('orient').meta({
      description: 'Check and closing shots never enter the fit.',
    }),
    observedAt: Instant.optional(),
    ...readings,
  })
  .superRefine(checkReadings)
  .meta({
    id: 'Shot',
    example: {
      clientId: 'st-7/1',
      target: 'HT-104',
      face: 'left',
      set: 1,
      horizontal: '12-04-31.0',
      zenith: '89-10-02.5',
      slopeDistance: 312.441,
      targetHeight: 0,
      prismConstantMm: -30,
      prismConstantAppliedMm: -30,
      appliedPpm: 0,
    },
  });

/** A shot to a point of ground: it needs no control point and no purpose. */
export const GroundShot = z
  .strictObject({
    clientId: ClientId.optional(),
    target: z.string().max(64).nullish(),
    observedAt: Instant.optional(),
    ...readings,
  })
  .superRefine(checkReadings)
  .meta({ id: 'GroundShot' });

export type Shot = z.output<typeof Shot>;
export type GroundShot = z.output<typeof GroundShot>;
