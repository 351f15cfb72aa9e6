import * as z from 'zod';
import { contract } from '@/openapi/contract';
import { BenchCheckParams, GradeCheckParams, ProjectParams } from '@/openapi/params';
import { BenchCheck, BenchCheckPage } from '@/openapi/schemas/benchCheck';
import { GradeCheck, GradeCheckPage } from '@/openapi/schemas/gradeCheck';
import { Name, PageQuery, Verdict } from '@/openapi/schemas/primitives';
import { LengthQuery } from '@/openapi/schemas/units';

export const listGradeChecks = contract({
  id: 'listGradeChecks',
  method: 'get',
  path: '/projects/{projectId}/grade-checks',
  tag: 'Grade',
  summary: 'List grade checks',
  description: 'Checks of ground against a layer, newest first.',
  access: 'grade:read',
  params: ProjectParams,
  query: z.strictObject({
    ...PageQuery.shape,
    ...LengthQuery.shape,
    layer: Name.optional(),
    verdict: Verdict.optional(),
  }),
  answers: { 200: { description: 'A page of grade checks.', json: GradeCheckPage } },
  problems: ['cursor_invalid'],
});

export const getGradeCheck = contract({
  id: 'getGradeCheck',
  method: 'get',
  path: '/projects/{projectId}/grade-checks/{gradeCheckId}',
  tag: 'Grade',
  summary: 'Read a grade check',
  description: 'Deviation, uncertainty, probability and verdict of one check.',
  access: 'grade:read',
  params: GradeCheckParams,
  query: LengthQuery,
  answers: { 200: { description: 'The grade check.', json: GradeCheck } },
});

export const listBenchChecks = contract({
  id: 'listBenchChecks',
  method: 'get',
  path: '/projects/{projectId}/bench-checks',
  tag: 'Grade',
  summary: 'List bench checks',
  description: 'Checks of cutting edges on known elevations, newest first.',
  access: 'grade:read',
  params: ProjectParams,
  query: z.strictObject({ ...PageQuery.shape, ...LengthQuery.shape, machine: Name.optional() }),
  answers: { 200: { description: 'A page of bench checks.', json: BenchCheckPage } },
  problems: ['cursor_invalid'],
});

export const getBenchCheck = contract({
  id: 'getBenchCheck',
  method: 'get',
  path: '/projects/{projectId}/bench-checks/{benchCheckId}',
  tag: 'Grade',
  summary: 'Read a bench check',
  description: 'Difference, correction and what to do about it, in words.',
  access: 'grade:read',
  params: BenchCheckParams,
  query: LengthQuery,
  answers: { 200: { description: 'The bench check.', json: BenchCheck } },
});
