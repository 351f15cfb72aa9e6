import * as z from 'zod';
import { LevelLimit, StatedLevelLimit } from './levelLimit';
import { Reading, SightLength } from './pegTest';
import { ClientId, Coordinate, Id, Instant, Moment, Name, Note, page, Verdict } from './primitives';
import { AnswerUnits } from './units';

export const LevelSight = z
  .strictObject({
    point: Name,
    backsight: Reading.optional(),
    backsightDistance: SightLength.optional(),
    intermediate: Reading.optional(),
    intermediateDistance: SightLength.optional().meta({
      description: 'The mean of its standing’s two sights by default.',
    }),
    foresight: Reading.optional(),
    foresightDistance: SightLength.optional(),
    bookedElevation: Coordinate.optional().meta({
      description: 'As the field book reduced it: compared, never used.',
    }),
  })
  .meta({
    id: 'LevelSight',
    description:
      'A line of the level book. A turning point has a foresight and a backsight, a point between them an intermediate sight alone. A staff held upside down, its foot on a soffit, reads negative.',
  });

export const LevelRunInput = z
  .strictObject({
    clientId: ClientId,
    from: Name.meta({ description: 'A control point with an elevation; the first line’s point.' }),
    to: Name.optional().meta({ description: 'The last line’s point.' }),
    instrument: Name.optional().meta({
      description:
        'A level: its stated accuracy is used, and the collimation of its last two-peg test is taken off. Without it common practice stands.',
    }),
    collimationApplied: z.boolean().optional().meta({
      description: 'True where the level itself took its collimation off the readings; false by default.',
    }),
    staff: z.string().min(1).max(120).optional().meta({ description: 'Which staff, for the record.' }),
    limit: LevelLimit.optional().meta({ description: 'The project’s by default.' }),
    observedAt: Instant.optional().meta({ description: 'The time of receipt by default.' }),
    sights: z.array(LevelSight).min(2).max(2000).meta({
      description:
        'The first line has a backsight alone, the last a foresight alone. Distances stand with every backsight and foresight of the run, or with none.',
    }),
  })
  .meta({
    id: 'LevelRunInput',
    example: {
      clientId: 'lv-0412-1',
      from: 'BM-1',
      to: 'BM-2',
      instrument: 'LV-1',
      observedAt: '2031-04-12T07:10:00-06:00',
      sights: [
        { point: 'BM-1', backsight: 6.213, backsightDistance: 98 },
        { point: 'HT-105', intermediate: 5.934 },
        {
          point: 'TP-1',
          foresight: 4.102,
          foresightDistance: 101,
          backsight: 5.87,
          backsightDistance: 110,
        },
        { point: 'BM-2', foresight: 5.759, foresightDistance: 108 },
      ],
    },
  });

const figure = z.number();
const maybe = z.number().nullable();

const Line = z.object({
  point: z.string(),
  kind: z.enum(['start', 'turning', 'intermediate', 'end']),
  backsight: maybe,
  intermediate: maybe,
  foresight: maybe,
  backsightDistance: maybe,
  intermediateDistance: maybe,
  foresightDistance: maybe,
  rise: maybe,
  fall: maybe,
  heightOfCollimation: maybe.meta({ description: 'Of the standing that begins here.' }),
  bookElevation: figure.meta({ description: 'From the readings alone.' }),
  reduction: figure.meta({ description: 'Collimation, curvature and refraction, summed up from the start.' }),
  adjustment: figure.meta({
    description: 'Share of the misclosure; 0 where the run is open or does not close within its limit.',
  }),
  elevation: figure.meta({ description: 'bookElevation + reduction + adjustment.' }),
  standardDeviation: figure,
  bookedElevation: maybe,
});

export const LevelRun = z
  .object({
    id: Id,
    clientId: z.string(),
    from: z.string(),
    to: z.string(),
    instrument: z.string().nullable(),
    staff: z.string().nullable(),
    observedAt: Moment,
    verdict: Verdict,
    reasons: z.array(Note),
    notes: z.array(Note),
    radio: z.string().meta({ description: 'One line to read out.' }),
    closure: z.object({
      kind: z.enum(['marks', 'loop', 'open']),
      levelled: figure.meta({ description: 'End minus start, reduced.' }),
      published: maybe,
      misclosure: maybe.meta({ description: 'Levelled minus published; null for an open run.' }),
      allowed: figure,
      standardDeviation: figure.meta({
        description: 'Of the misclosure, both marks included; of the levelled difference for an open run.',
      }),
      limit: StatedLevelLimit,
    }),
    arithmetic: z
      .object({
        backsights: figure,
        foresights: figure,
        rises: figure,
        falls: figure,
        difference: figure,
        agrees: z.boolean(),
      })
      .meta({
        description:
          'Foot of the page: backsights − foresights = rises − falls = last − first book elevation.',
      }),
    sights: z.object({
      setups: z.int(),
      length: figure.meta({
        description: 'All backsights and foresights; 30 m each where none was measured.',
      }),
      lengthSource: z.enum(['measured', 'assumed']),
      backsights: maybe,
      foresights: maybe,
      largestImbalance: maybe.meta({
        description: 'Backsights minus foresights, where they are furthest apart at a turning point.',
      }),
    }),
    collimation: z
      .object({
        source: z.enum(['pegTest', 'untested', 'instrument']),
        pegTestId: Id.nullable(),
        mmPerM: figure.meta({ description: 'Taken off the readings.' }),
        arcsec: figure,
        sigmaMmPerM: figure,
        effect: figure.meta({ description: 'What it made of the levelled difference.' }),
      })
      .meta({
        description:
          'How the line of sight is known: by the last two-peg test that did not fail, by none, or taken off by the level itself.',
      }),
    curvatureAndRefraction: figure.meta({ description: 'Taken off the levelled difference.' }),
    accuracyMmPerKm: figure.meta({
      description: 'Of the level, one kilometre there and back (ISO 17123-2); a single run counts √2.',
    }),
    points: z.array(Line),
    control: z
      .array(
        z.object({
          point: z.string(),
          version: z.int(),
          role: z.enum(['passed', 'end']),
          publishedElevation: figure,
          levelledElevation: figure,
          difference: figure.meta({ description: 'Levelled minus published.' }),
          standardDeviation: figure,
          outcome: z.enum(['agrees', 'differs']),
        }),
      )
      .meta({
        description:
          'Control points on the way: a difference agrees within two of its standard deviations, published elevation included.',
      }),
    differences: z
      .array(
        z.object({
          from: z.string(),
          to: z.string(),
          difference: figure.meta({ description: 'To minus from, reduced, nothing distributed.' }),
          standardDeviation: figure,
          length: figure,
          setups: z.int(),
        }),
      )
      .meta({
        description:
          'The run cut at the control points that it turned on: what a network takes of it. Points read between have no part.',
      }),
    provenance: z.object({
      method: z.string(),
      version: z.string(),
      uploadId: Id,
      calibrationVersion: z.int().nullable(),
      control: z.array(z.object({ name: z.string(), version: z.int() })),
    }),
    units: AnswerUnits,
  })
  .meta({ id: 'LevelRun' });

export const LevelRunPage = page('LevelRunPage', LevelRun);
