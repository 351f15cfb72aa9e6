import * as z from 'zod';
import { BenchCheck, BenchCheckInput } from './benchCheck';
import { GradeCheck, GradeShotInput } from './gradeCheck';
import { LevelRun, LevelRunInput } from './levelRun';
import { PegTest, PegTestInput } from './pegTest';
import { ClientId, Id, Instant, Moment, Name, page } from './primitives';
import { ProblemItem } from './problem';
import { Setup, SetupCheck } from './setup';
import { Shot } from './shot';
import { ConfirmUnits, SubmissionUnits } from './units';

export const SetupInput = z
  .strictObject({
    clientId: ClientId,
    station: Name,
    method: z.enum(['resection', 'identify', 'backsight']),
    instrument: Name,
    instrumentHeight: z.number().min(0).max(100).nullable().meta({
      description: 'Axis above the mark; null where no mark is occupied.',
    }),
    stationPoint: Name.optional().meta({
      description: 'The occupied mark of a setup by backsight, required there and nowhere else.',
    }),
    toleranceClass: z.string().max(120).optional().meta({ description: 'The project’s first by default.' }),
    observedAt: Instant,
    atmosphere: z
      .strictObject({
        temperature: z.number().min(-80).max(150),
        pressure: z.number().gt(0).max(1200),
        humidityPercent: z
          .number()
          .min(0)
          .max(100)
          .optional()
          .meta({ description: 'Relative humidity; 60 where neither it nor wetBulb is sent.' }),
        wetBulb: z.number().min(-80).max(150).optional().meta({
          description: 'Of an aspirated psychrometer, in units.temperature, not below freezing.',
        }),
      })
      .optional()
      .meta({ description: 'Pressure at the station, not reduced to sea level.' }),
    refraction: z
      .strictObject({ coefficient: z.number().min(-5).max(5), sigma: z.number().min(0).max(5) })
      .optional()
      .meta({ description: 'Coefficient of refraction k of this setup; the project’s by default.' }),
    shots: z.array(Shot).min(1).max(500),
  })
  .meta({ id: 'SetupInput' });

export const SetupCheckInput = z
  .strictObject({
    clientId: ClientId,
    setup: z.string().min(1).max(128).meta({ description: 'clientId or id of the setup.' }),
    purpose: z.enum(['check', 'closing']),
    observedAt: Instant.optional(),
    shots: z.array(Shot).min(1).max(500),
  })
  .meta({ id: 'SetupCheckInput' });

/** Kinds that the hub keeps but does not compute yet. */
const Uncomputed = z.looseObject({ clientId: ClientId });

export const UploadDocument = z
  .strictObject({
    clientId: ClientId,
    units: SubmissionUnits,
    confirmUnits: ConfirmUnits,
    setups: z.array(SetupInput).max(1000).default([]),
    setupChecks: z.array(SetupCheckInput).max(1000).default([]),
    gradeShots: z.array(GradeShotInput).max(10_000).default([]),
    benchChecks: z.array(BenchCheckInput).max(1000).default([]),
    roverPoints: z.array(Uncomputed).max(10_000).default([]),
    levelRuns: z.array(LevelRunInput).max(1000).default([]),
    pegTests: z.array(PegTestInput).max(1000).default([]),
  })
  .meta({ id: 'UploadDocument' });

export const UPLOAD_KINDS = [
  'setups',
  'setupChecks',
  'gradeShots',
  'benchChecks',
  'roverPoints',
  'levelRuns',
  'pegTests',
] as const;
export type UploadKind = (typeof UPLOAD_KINDS)[number];

export const Upload = z
  .object({
    id: Id,
    clientId: z.string().nullable().meta({ description: 'Null where the body could not be read.' }),
    status: z.enum(['processed', 'refused']),
    sha256: z.string(),
    size: z.int().meta({ description: 'Bytes as they came.' }),
    mediaType: z.string(),
    contentEncoding: z.string().nullable(),
    receivedAt: Moment,
    sender: z.string().meta({ description: 'The key or person that sent it.' }),
    counts: z.object({ accepted: z.int(), refused: z.int() }),
  })
  .meta({ id: 'Upload' });

export const UploadPage = page('UploadPage', Upload);

export const Receipt = z
  .object({
    upload: Upload,
    refused: z.array(ProblemItem),
    setups: z.array(Setup),
    setupChecks: z.array(SetupCheck),
    gradeChecks: z.array(GradeCheck),
    benchChecks: z.array(BenchCheck),
    roverPoints: z.array(z.looseObject({})),
    levelRuns: z.array(LevelRun),
    pegTests: z.array(PegTest),
  })
  .meta({ id: 'Receipt', description: 'What became of an upload, item by item.' });
