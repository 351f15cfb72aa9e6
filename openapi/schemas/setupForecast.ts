import * as z from 'zod';
import { Coordinate, Name, NonNegativeLength, Note, PositiveLength, Title, Verdict } from './primitives';
import { AnswerUnits, ConfirmUnits, LengthUnits } from './units';

const figure = z.number();
const maybe = z.number().nullable();

/** Cells of a grid at most: under a second of one core with eight targets, in slices. */
export const MOST_CELLS = 2500;

const Candidate = z
  .strictObject({
    name: Title.optional(),
    easting: Coordinate,
    northing: Coordinate,
    elevation: Coordinate.optional().meta({
      description: 'Of the ground; the mean of the targets’ where none is stated.',
    }),
  })
  .meta({ id: 'ForecastCandidate' });

const Extent = z
  .strictObject({
    minEasting: Coordinate,
    maxEasting: Coordinate,
    minNorthing: Coordinate,
    maxNorthing: Coordinate,
  })
  .superRefine(({ minEasting, maxEasting, minNorthing, maxNorthing }, context) => {
    const issue = (path: string) =>
      context.addIssue({ code: 'custom', path: [path], message: 'The extent ends before it begins.' });
    if (maxEasting < minEasting) issue('maxEasting');
    if (maxNorthing < minNorthing) issue('maxNorthing');
  })
  .meta({ id: 'ForecastExtent' });

const Grid = z
  .strictObject({
    extent: Extent.optional().meta({ description: 'The box around the targets by default.' }),
    spacing: PositiveLength.optional().meta({
      description: 'A round figure that makes 625 cells at most by default.',
    }),
  })
  .meta({ id: 'ForecastGrid', description: `At most ${MOST_CELLS.toLocaleString('en')} cells.` });

export const SetupForecastRequest = z
  .strictObject({
    units: LengthUnits,
    confirmUnits: ConfirmUnits,
    instrument: Name,
    toleranceClass: Title.optional().meta({ description: 'The project’s first by default.' }),
    workRadius: PositiveLength.optional().meta({ description: 'In place of the class’ working radius.' }),
    targets: z
      .array(Name)
      .min(1)
      .max(200)
      .optional()
      .meta({ description: 'All trusted control by default.' }),
    candidates: z.array(Candidate).min(1).max(200).optional(),
    grid: Grid.optional(),
    elevation: Coordinate.optional().meta({
      description: 'Of the ground, where a candidate states none and for all cells of a grid.',
    }),
    instrumentHeight: NonNegativeLength.optional().meta({ description: '1.6 m by default.' }),
    targetHeight: NonNegativeLength.optional().meta({
      description: 'Of all reflectors above their marks; 0 by default.',
    }),
    maximumRange: PositiveLength.optional().meta({
      description: 'Longest sight; 300 m by default (common practice).',
    }),
    faces: z.enum(['both', 'left']).default('both'),
    sets: z.int().min(1).max(20).default(1),
    observe: z
      .array(z.enum(['direction', 'zenith', 'distance']))
      .min(1)
      .max(3)
      .default(['direction', 'zenith', 'distance'])
      .meta({ description: 'What is read of each target.' }),
    atmosphereMeasured: z.boolean().default(true).meta({
      description: 'Whether temperature and station pressure will come with the setup.',
    }),
  })
  .superRefine(({ candidates, grid }, context) => {
    if ((candidates === undefined) !== (grid === undefined)) return;
    const code = candidates ? 'mutually_exclusive' : 'one_of_required';
    const message = 'A forecast is for candidates or for a grid.';
    context.addIssue({ code: 'custom', path: [], message, params: { code } });
  })
  .meta({
    id: 'SetupForecastRequest',
    example: {
      units: { length: 'ft' },
      instrument: 'TS-2',
      toleranceClass: 'earthwork',
      candidates: [
        { name: 'gate', easting: 5180, northing: 10110 },
        { name: 'stockpile', easting: 5060, northing: 9900 },
      ],
    },
  });

const Place = z.object({ easting: figure, northing: figure, elevation: figure });

const Hidden = z
  .object({ target: z.string(), size: maybe })
  .nullable()
  .meta({ description: 'size null: nothing else controls the reading, an error of any size hides in it.' });

export const SetupForecast = z
  .object({
    rank: z.int().meta({
      description: '1 is the best: what passes first, then by what it leaves of the work’s limits.',
    }),
    name: z.string().nullable(),
    position: Place.meta({ description: 'elevation is the ground’s, as it was taken.' }),
    verdict: Verdict.meta({
      description:
        'What the class would say of the geometry alone: pass, or hold with the reason. Never fail: nobody has made a mistake yet.',
    }),
    verdicts: z.object({ horizontal: Verdict, vertical: Verdict }),
    reasons: z.array(Note),
    notes: z.array(Note),
    standardDeviations: z
      .object({ easting: figure, northing: figure, elevation: maybe, orientationArcsec: figure })
      .nullable()
      .meta({ description: 'This and all that follows is null where no station comes of it.' }),
    errorEllipse: z
      .object({ semiMajor: figure, semiMinor: figure, azimuth: figure, confidence: z.literal(0.95) })
      .nullable(),
    accuracyAtWork: z
      .object({
        radius: figure,
        horizontal: figure,
        vertical: maybe,
        confidence: z.literal(0.95),
        limits: z.object({ horizontal: figure, vertical: figure }),
      })
      .nullable(),
    geometry: z
      .object({
        targets: z.int().meta({ description: 'Distinct marks in range: the redundancy that counts.' }),
        spreadDegrees: figure,
        insideControl: z.boolean(),
        weakestWithout: z.object({ target: z.string(), shift: maybe }).nullable().meta({
          description:
            'The mark whose loss moves the station most, and by how much at 95 %; shift null: the others do not determine it.',
        }),
      })
      .nullable(),
    smallestBlunder: z
      .object({ directionArcsec: Hidden, zenithArcsec: Hidden, distance: Hidden })
      .nullable()
      .meta({
        description:
          'The smallest error that is found in any reading of the kind (power 0.80 at 0.001), with the target where the largest hides.',
      }),
    undetected: z.object({ horizontal: maybe, vertical: maybe }).nullable().meta({
      description:
        'How far the station may be off by an error in one reading that just stays hidden; null: without limit.',
    }),
    targets: z
      .array(
        z.object({
          target: z.string(),
          distance: figure.meta({ description: 'Horizontal, on the ground.' }),
          azimuth: figure,
          without: z.object({ horizontal: figure, vertical: maybe }).nullable().meta({
            description:
              'How far the station may move without this mark, at 95 %; null where the others do not determine it.',
          }),
          residual: z
            .object({ horizontal: figure, vertical: maybe })
            .nullable()
            .meta({ description: 'What its residual may be without any mistake, at 95 %.' }),
        }),
      )
      .meta({ description: 'Marks in range, the nearest first.' }),
  })
  .meta({ id: 'SetupForecast' });

const values = z.array(maybe);

const ForecastMap = z
  .object({
    origin: z.object({ easting: figure, northing: figure }).meta({ description: 'South-west cell.' }),
    spacing: figure,
    rows: z.int().meta({ description: 'From south to north.' }),
    columns: z.int().meta({ description: 'From west to east.' }),
    elevation: figure.meta({ description: 'Of the ground, the same for all cells.' }),
    verdict: z.array(Verdict),
    targets: z.array(z.int()).meta({ description: 'Marks in range.' }),
    ellipseSemiMajor: values.meta({ description: 'At 95 %.' }),
    elevationDeviation: values.meta({ description: 'One standard deviation.' }),
    orientationArcsec: values.meta({ description: 'One standard deviation.' }),
    workHorizontal: values.meta({ description: 'At the working radius and 95 %.' }),
    workVertical: values.meta({ description: 'At the working radius and 95 %.' }),
    weakestShift: values.meta({
      description: 'Of the station without the mark whose loss moves it most, at 95 %.',
    }),
  })
  .meta({
    id: 'SetupForecastMap',
    description:
      'Values row by row, the south-west cell first: index = row × columns + column. Null where no station comes of the marks in range.',
  });

export const SetupForecasts = z
  .object({
    summary: z.string().meta({ description: 'Where to stand, in plain words.' }),
    units: AnswerUnits,
    instrument: z.object({ name: z.string(), calibration: z.int() }),
    toleranceClass: z.string(),
    assumed: z
      .object({
        faces: z.enum(['both', 'left']),
        sets: z.int(),
        observe: z.array(z.enum(['direction', 'zenith', 'distance'])),
        instrumentHeight: figure,
        targetHeight: figure,
        minimumRange: figure,
        maximumRange: figure,
        workRadius: figure,
        atmosphereMeasured: z.boolean(),
      })
      .meta({ description: 'What was sent, and what stood where nothing was.' }),
    targets: z.array(
      z.object({
        target: z.string(),
        version: z.int(),
        status: z.enum(['trusted', 'suspect']),
        easting: figure,
        northing: figure,
        elevation: maybe,
      }),
    ),
    forecasts: z.array(SetupForecast).meta({
      description: 'All candidates, or the best cells of the grid, well apart; the best first.',
    }),
    grid: ForecastMap.nullable(),
    notes: z.array(Note),
    limits: z.array(z.string()).meta({ description: 'What this cannot know.' }),
    provenance: z
      .object({
        method: z.string(),
        version: z.string(),
        of: z.object({ method: z.string(), version: z.string() }),
      })
      .meta({
        description:
          'The method, whose page is /reference/methods/{method}, and the computation of setups that it forecasts.',
      }),
  })
  .meta({ id: 'SetupForecasts' });
