import * as z from 'zod';
import { contract } from '@/openapi/contract';
import { InstrumentParams, ProjectParams } from '@/openapi/params';
import { Collimation } from '@/openapi/schemas/collimation';
import {
  CalibrationCreate,
  Instrument,
  InstrumentCreate,
  InstrumentPage,
} from '@/openapi/schemas/instrument';
import { PageQuery } from '@/openapi/schemas/primitives';

export const createInstrument = contract({
  id: 'createInstrument',
  method: 'post',
  path: '/projects/{projectId}/instruments',
  tag: 'Instruments',
  summary: 'Register an instrument',
  description:
    'With its accuracy as stated after ISO 17123; what is not stated is taken from common practice and said so.',
  access: 'projects:write',
  params: ProjectParams,
  body: { json: InstrumentCreate },
  answers: { 201: { description: 'The instrument.', json: Instrument } },
  problems: ['name_taken'],
});

export const listInstruments = contract({
  id: 'listInstruments',
  method: 'get',
  path: '/projects/{projectId}/instruments',
  tag: 'Instruments',
  summary: 'List instruments',
  description: 'The instruments and machines of a project, by name.',
  access: 'projects:read',
  params: ProjectParams,
  query: PageQuery,
  answers: { 200: { description: 'A page of instruments.', json: InstrumentPage } },
  problems: ['cursor_invalid'],
});

export const getInstrument = contract({
  id: 'getInstrument',
  method: 'get',
  path: '/projects/{projectId}/instruments/{instrumentName}',
  tag: 'Instruments',
  summary: 'Read an instrument',
  description: 'With its present stated figures.',
  access: 'projects:read',
  params: InstrumentParams,
  answers: { 200: { description: 'The instrument.', json: Instrument } },
});

export const getCollimation = contract({
  id: 'getCollimation',
  method: 'get',
  path: '/projects/{projectId}/instruments/{instrumentName}/collimation',
  tag: 'Instruments',
  summary: 'Follow collimation and vertical index',
  description:
    'What both faces have shown of an instrument, setup by setup, since its last calibration: where it stands, whether it changed or drifts, in plain words.',
  access: 'setups:read',
  params: InstrumentParams,
  query: z.strictObject({
    limit: z.coerce.number().int().min(1).max(200).default(100).meta({
      description: 'Newest setups to look at.',
    }),
  }),
  answers: { 200: { description: 'The history, newest first.', json: Collimation } },
});

export const createCalibration = contract({
  id: 'createCalibration',
  method: 'post',
  path: '/projects/{projectId}/instruments/{instrumentName}/calibrations',
  tag: 'Instruments',
  summary: 'State new figures for an instrument',
  description: 'Setups from now on use them; earlier ones keep the figures they were computed with.',
  access: 'projects:write',
  params: InstrumentParams,
  body: { json: CalibrationCreate },
  answers: { 201: { description: 'The instrument.', json: Instrument } },
});
