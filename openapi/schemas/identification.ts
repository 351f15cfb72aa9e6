import * as z from 'zod';

const figure = z.number();
const maybe = z.number().nullable();

const Candidate = z
  .object({
    position: z.object({ easting: figure, northing: figure, elevation: maybe }),
    instrumentElevation: maybe,
    orientation: figure.meta({ description: 'Azimuth of the circle’s zero, degrees.' }),
    matched: z.int().meta({ description: 'Reflectors that stand on control.' }),
    weightedSquares: figure.meta({ description: 'vᵀPv of east, north, height and orientation from them.' }),
    behind: figure.meta({ description: 'ln of the odds of the first against it; 0 for the first.' }),
    targets: z.array(z.object({ target: z.string().nullable(), shots: z.array(z.string()) })).meta({
      description: 'Which control point each reflector stands on; null for a stray.',
    }),
  })
  .meta({ id: 'IdentificationCandidate' });

const DecidingShot = z
  .object({
    target: z.string(),
    readings: z
      .array(
        z.object({
          horizontal: figure.meta({ description: 'Face left, degrees.' }),
          zenith: maybe.meta({ description: 'Face left, degrees, to the mark itself.' }),
          slopeDistance: maybe,
          horizontalDistance: figure.meta({ description: 'Ground distance.' }),
        }),
      )
      .meta({ description: 'What the shot would read under each candidate, in their order.' }),
  })
  .meta({
    id: 'DecidingShot',
    description:
      'The one shot that would tell the candidates apart: send it by name, as a check shot of the setup or as a setup check.',
  });

export const Identification = z
  .object({
    ambiguous: z.boolean().meta({
      description:
        'Another assignment that leaves at most a quarter of the reflectors stray has the instrument stand elsewhere, or the margin is under ln 1000 = 6.9. Such a setup is held and cannot be released.',
    }),
    margin: maybe.meta({
      description:
        'ln of the odds (ratio of marginal likelihoods) against the second-best assignment, or against chance where there is no other: half the difference of the weighted squares where both match the same number of reflectors; a reflector more counts what it is unlikely to find a control point by chance.',
    }),
    reflectors: z.int().meta({
      description: 'Distinct marks that were shot: faces, sets and repeats are one.',
    }),
    matched: z.int().meta({ description: 'Of them, those on control.' }),
    candidates: z.array(Candidate).meta({
      description: 'The assignment that the setup is computed with, then the others that could be true.',
    }),
    more: z.boolean().meta({ description: 'There are more candidates than are listed.' }),
    strays: z.array(
      z.object({
        shots: z.array(z.string()),
        nearest: z
          .object({ target: z.string(), horizontal: figure, vertical: maybe })
          .nullable()
          .meta({ description: 'The control point that it misses least, and by how much.' }),
      }),
    ),
    samePlace: z.array(z.object({ target: z.string(), others: z.array(z.string()) })).meta({
      description: 'Control points at the place of another, which was named for them all.',
    }),
    deciding: DecidingShot.nullable(),
  })
  .meta({ id: 'Identification', description: 'How the targets of unnamed shots were found.' });
