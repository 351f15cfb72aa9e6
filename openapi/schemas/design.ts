import * as z from 'zod';
import {
  Coordinate,
  Id,
  Moment,
  Name,
  NonNegativeLength,
  PlanPoint,
  Point,
  page,
  Text,
  Title,
} from './primitives';
import { AnswerUnits, ConfirmUnits, LengthUnits } from './units';

const figure = z.number();
const maybe = z.number().nullable();

export const Represents = z
  .enum(['finish', 'subgrade', 'base', 'ground', 'other'])
  .meta({ id: 'Represents' });

export const MAX_SURFACE_POINTS = 200_000;

export const SurfaceCreate = z
  .strictObject({
    units: LengthUnits,
    confirmUnits: ConfirmUnits,
    name: Title,
    represents: Represents,
    points: z
      .array(z.tuple([Coordinate, Coordinate, Coordinate]))
      .min(3)
      .max(MAX_SURFACE_POINTS)
      .optional()
      .meta({
        description: '[easting, northing, elevation] each.',
      }),
    triangles: z
      .array(z.tuple([z.int().min(0), z.int().min(0), z.int().min(0)]))
      .min(1)
      .max(2 * MAX_SURFACE_POINTS)
      .optional()
      .meta({ description: 'Indices into points, from 0; drawn by Delaunay where absent.' }),
    plane: z
      .strictObject({
        through: Point,
        azimuth: z.number().min(0).lt(360).meta({ description: 'Degrees.' }),
        slopePercent: z
          .number()
          .min(-1000)
          .max(1000)
          .meta({ description: 'The rise along the azimuth; negative falls.' }),
      })
      .optional(),
  })
  .superRefine((surface, context) => {
    const issue = (code: string, message: string, path: string[] = []) =>
      context.addIssue({ code: 'custom', path, message, params: { code } });
    if (!surface.points && !surface.plane) issue('one_of_required', 'A surface carries points or a plane.');
    if (surface.points && surface.plane)
      issue('mutually_exclusive', 'A surface carries points or a plane, not both.');
    if (surface.triangles && !surface.points) issue('required', 'Triangles need their points.', ['points']);
  })
  .meta({
    id: 'SurfaceCreate',
    example: {
      units: { length: 'ft' },
      name: 'Pad, revision B',
      represents: 'finish',
      plane: { through: { easting: 5000, northing: 8000, elevation: 412 }, azimuth: 90, slopePercent: -1.5 },
    },
  });

export const Surface = z
  .object({
    id: Id,
    name: z.string(),
    represents: Represents,
    kind: z.enum(['tin', 'plane']),
    sha256: z.string().meta({ description: 'Of the content: equal surfaces have equal hashes.' }),
    points: z.int().nullable(),
    triangles: z.int().nullable(),
    extent: z
      .object({ minEasting: figure, maxEasting: figure, minNorthing: figure, maxNorthing: figure })
      .nullable()
      .meta({ description: 'Null for a plane, which has no edge.' }),
    units: AnswerUnits,
    createdAt: Moment,
  })
  .meta({ id: 'Surface' });

export const SurfacePage = page('SurfacePage', Surface);

export const ElevationsQuery = z
  .strictObject({
    units: LengthUnits,
    confirmUnits: ConfirmUnits,
    points: z.array(PlanPoint).min(1).max(10_000),
  })
  .meta({
    id: 'ElevationsQuery',
    example: { units: { length: 'ft' }, points: [{ easting: 5010, northing: 8010 }] },
  });

export const Elevations = z
  .object({
    surface: z.object({ id: Id, sha256: z.string() }),
    units: AnswerUnits,
    data: z.array(
      z
        .object({
          elevation: figure,
          slopePercent: figure.meta({ description: 'Steepest rise.' }),
          aspect: maybe.meta({ description: 'Azimuth of the steepest fall, degrees; null where level.' }),
          triangle: z.int().nullable(),
        })
        .nullable()
        .meta({ id: 'SurfaceElevation', description: 'Null outside the surface.' }),
    ),
  })
  .meta({ id: 'Elevations' });

export const Acceptance = z
  .discriminatedUnion('rule', [
    z.strictObject({ rule: z.literal('everyPoint'), citation: Text.min(1) }),
    z
      .strictObject({
        rule: z.literal('window'),
        required: z.int().min(1).max(100),
        of: z.int().min(1).max(100),
        citation: Text.min(1),
      })
      .refine((rule) => rule.required <= rule.of, { path: ['required'], error: 'required is at most of.' }),
    z.strictObject({
      rule: z.literal('percentWithinLimits'),
      minimum: z.number().gt(0).max(100),
      citation: Text.min(1),
    }),
  ])
  .meta({ id: 'Acceptance', description: 'How a lot is accepted, with the clause that says so.' });

const Tolerance = z.strictObject({
  below: NonNegativeLength,
  above: NonNegativeLength,
  citation: Text.optional(),
});

export const LayerCreate = z
  .strictObject({
    units: LengthUnits,
    confirmUnits: ConfirmUnits,
    name: Name,
    surfaceId: Id,
    offset: z
      .number()
      .min(-1e4)
      .max(1e4)
      .meta({ description: 'Vertical; −0.5 = half a unit under the surface.' }),
    tolerance: Tolerance.refine((t) => t.below + t.above > 0, {
      error: 'A tolerance of nothing can never be met.',
    }),
    acceptance: Acceptance.optional().meta({
      description: 'No rule by default: each point is judged on its own.',
    }),
  })
  .meta({
    id: 'LayerCreate',
    example: {
      units: { length: 'ft' },
      name: 'subgrade',
      surfaceId: '0198f2b4-6c1e-7a35-9c0d-2b7f5d1e8a44',
      offset: -0.5,
      tolerance: { below: 0.1, above: 0.05, citation: 'project special 2.4' },
    },
  });

export const Layer = z
  .object({
    name: z.string(),
    version: z.int(),
    surfaceId: Id,
    surfaceSha256: z.string(),
    surfaceName: z.string(),
    represents: Represents,
    offset: figure,
    offsetText: z.string().meta({ example: '0.50 ft below Pad, revision B' }),
    tolerance: z.object({ below: figure, above: figure, citation: z.string().nullable() }),
    acceptance: Acceptance.nullable(),
    units: AnswerUnits,
    createdAt: Moment,
  })
  .meta({ id: 'Layer' });

export const LayerPage = page('LayerPage', Layer);
