import * as z from 'zod';
import { contract } from '@/openapi/contract';
import { LevelRunParams, PegTestParams, ProjectParams } from '@/openapi/params';
import { LevelRun, LevelRunPage } from '@/openapi/schemas/levelRun';
import { PegTest, PegTestPage } from '@/openapi/schemas/pegTest';
import { Name, PageQuery, Verdict } from '@/openapi/schemas/primitives';
import { LengthQuery } from '@/openapi/schemas/units';

export const listLevelRuns = contract({
  id: 'listLevelRuns',
  method: 'get',
  path: '/projects/{projectId}/level-runs',
  tag: 'Levelling',
  summary: 'List level runs',
  description: 'Runs with their books reduced, newest first.',
  access: 'control:read',
  params: ProjectParams,
  query: z.strictObject({
    ...PageQuery.shape,
    ...LengthQuery.shape,
    verdict: Verdict.optional(),
    instrument: Name.optional(),
    point: Name.optional().meta({
      description: 'Runs that start or end at the point, or that passed it as a control point.',
    }),
  }),
  answers: { 200: { description: 'A page of level runs.', json: LevelRunPage } },
  problems: ['cursor_invalid'],
});

export const getLevelRun = contract({
  id: 'getLevelRun',
  method: 'get',
  path: '/projects/{projectId}/level-runs/{levelRunId}',
  tag: 'Levelling',
  summary: 'Read a level run',
  description: 'The book reduced, its closure, and what it says of the control points on its way.',
  access: 'control:read',
  params: LevelRunParams,
  query: LengthQuery,
  answers: { 200: { description: 'The level run.', json: LevelRun } },
});

export const listPegTests = contract({
  id: 'listPegTests',
  method: 'get',
  path: '/projects/{projectId}/peg-tests',
  tag: 'Levelling',
  summary: 'List two-peg tests',
  description: 'The history of the levels’ lines of sight, newest first.',
  access: 'projects:read',
  params: ProjectParams,
  query: z.strictObject({ ...PageQuery.shape, ...LengthQuery.shape, instrument: Name.optional() }),
  answers: { 200: { description: 'A page of two-peg tests.', json: PegTestPage } },
  problems: ['cursor_invalid'],
});

export const getPegTest = contract({
  id: 'getPegTest',
  method: 'get',
  path: '/projects/{projectId}/peg-tests/{pegTestId}',
  tag: 'Levelling',
  summary: 'Read a two-peg test',
  description: 'The collimation with its uncertainty, and whether the level needs adjusting.',
  access: 'projects:read',
  params: PegTestParams,
  query: LengthQuery,
  answers: { 200: { description: 'The two-peg test.', json: PegTest } },
});
