import * as z from 'zod';

/** What a setup tells of its reductions, its geometry and the mark under it. */

const figure = z.number();
const maybe = z.number().nullable();
const Place = z.object({ easting: figure, northing: figure, elevation: maybe });

const Outcome = z.enum(['agreed', 'over', 'disagrees', 'notCapable']).meta({
  id: 'CheckOutcome',
  description:
    'agreed: within the tolerance and within 2u, and 2u within the tolerance. over: beyond the tolerance. disagrees: more than the uncertainty explains. notCapable: 2u exceeds the tolerance.',
});

export { Outcome as CheckOutcome };

export const FaceErrors = z
  .object({
    twoCollimationArcsec: maybe.meta({ description: '2c: face left minus face right, at the horizon.' }),
    twoCollimationSigmaArcsec: maybe.meta({ description: 'As the stated accuracy makes it.' }),
    twoCollimationSpreadArcsec: maybe.meta({
      description: 'Standard deviation of one pair as the pairs show it; null of fewer than two.',
    }),
    collimationPairs: z
      .int()
      .nullable()
      .meta({ description: 'Null where there are none, or were not counted.' }),
    verticalIndexArcsec: maybe.meta({ description: '(left + right − 360°)/2 of zenith angles.' }),
    verticalIndexSigmaArcsec: maybe,
    verticalIndexSpreadArcsec: maybe,
    indexPairs: z.int().nullable(),
  })
  .meta({ id: 'FaceErrors', description: 'What the means of two faces are free of.' });

export const DirectionSets = z
  .object({
    sets: z.int(),
    directions: z.array(
      z.object({
        target: z.string(),
        mean: figure.meta({ description: 'Mean reading, degrees on the circle as the first set had it.' }),
        largestArcsec: figure.meta({ description: 'Largest departure of a set from the mean.' }),
      }),
    ),
    degreesOfFreedom: z.int(),
    standardDeviationArcsec: figure.meta({ description: 'Of a direction read in one set (ISO 17123-3).' }),
    ofMeanArcsec: figure.meta({ description: 'Of the mean of all sets.' }),
    statedArcsec: figure.meta({ description: 'What the instrument states for one set as it was read.' }),
    asStated: z.boolean().meta({ description: 'No larger than stated: upper-tail χ² test at 95 %.' }),
  })
  .meta({
    id: 'DirectionSets',
    description: 'Sets of directions meaned, with the spread that they show themselves.',
  });

export const Reductions = z
  .object({
    ppm: maybe.meta({
      description:
        'First velocity correction put to the distances, appliedPpm taken out first; null without an atmosphere.',
    }),
    atmosphere: z
      .object({
        temperatureC: figure,
        pressureHpa: figure,
        humidityPercent: figure,
        humiditySource: z.enum(['stated', 'wetBulb', 'default']),
      })
      .nullable(),
    carrierWavelengthNm: maybe,
    referenceRefractivity: maybe.meta({ description: '(n−1)·10⁶ that the distance meter is set up for.' }),
    combinedFactor: figure,
    refraction: z.object({
      coefficient: figure.meta({ description: 'k as chosen.' }),
      sigma: figure,
      fitted: figure.meta({ description: 'k as the adjustment leaves it.' }),
    }),
    earthRadius: figure,
  })
  .meta({ id: 'Reductions', description: 'How readings became distances, directions and heights.' });

export const Occupied = z
  .object({
    point: z.string(),
    version: z.int(),
    status: z.enum(['trusted', 'suspect', 'quarantined']),
    published: Place,
    residual: Place.meta({ description: 'Position from the fit minus published coordinates.' }),
    standardised: z.object({ easting: maybe, northing: maybe, elevation: maybe }).meta({
      description: 'w of the coordinates that hold the axis; null where nothing controls them.',
    }),
    without: z
      .object({ horizontal: maybe, vertical: maybe })
      .meta({ description: 'How the station moves by the backsights alone; null where they do not say.' }),
  })
  .meta({ id: 'Occupied', description: 'The mark under the instrument, of a setup by backsights.' });

const Comparison = z
  .object({
    measured: figure,
    published: figure,
    difference: figure.meta({ description: 'Measured minus published.' }),
    uncertainty: figure.meta({ description: 'One standard deviation, u.' }),
    tolerance: figure,
    outcome: Outcome,
  })
  .meta({ id: 'BacksightComparison' });

export const Backsight = z
  .object({
    target: z.string(),
    distance: Comparison.nullable().meta({ description: 'Horizontal, in the grid.' }),
    height: Comparison.nullable().meta({ description: 'Mark above occupied mark.' }),
  })
  .meta({
    id: 'Backsight',
    description: 'Distance and height to a backsight against published coordinates, before any adjustment.',
  });

export const Geometry = z
  .object({
    targets: z.int(),
    spreadDegrees: figure.meta({ description: '360 minus the largest gap.' }),
    insideControl: z.boolean(),
    weakestWithout: z.object({ target: z.string(), shift: figure }).nullable(),
    leaveOneOut: z
      .array(
        z.object({
          target: z.string(),
          position: z
            .object({ easting: figure, northing: figure, instrumentElevation: maybe })
            .nullable()
            .meta({ description: 'Null where the other marks do not determine it.' }),
          horizontal: maybe.meta({ description: 'How far it is from the position with the mark.' }),
          vertical: maybe,
          turnArcsec: maybe.meta({ description: 'Turn of the orientation.' }),
        }),
      )
      .meta({ description: 'The station without each mark in turn.' }),
    dangerCircle: z
      .object({
        marks: z.array(z.string()),
        centre: z.object({ easting: figure, northing: figure }),
        radius: figure,
        distance: figure.meta({ description: 'Station from the circle; positive outside.' }),
        ratio: figure.meta({ description: 'The distance as a part of the radius, without sign.' }),
        near: z.boolean().meta({ description: 'Within a tenth of the radius.' }),
      })
      .nullable()
      .meta({
        description:
          'The circle through the marks of a station by directions alone, on which it is not determined.',
      }),
    alternatives: z
      .array(
        z.object({
          easting: figure,
          northing: figure,
          orientation: maybe,
          worseBy: figure.meta({ description: 'vᵀPv minus that of the position taken.' }),
        }),
      )
      .meta({ description: 'Other stations that fit the same shots.' }),
  })
  .meta({ id: 'SetupGeometry' });
