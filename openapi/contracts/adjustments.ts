import * as z from 'zod';
import { contract } from '@/openapi/contract';
import { AdjustmentParams, Flag, ProjectParams } from '@/openapi/params';
import {
  Adjustment,
  AdjustmentApplied,
  AdjustmentApply,
  AdjustmentComparison,
  AdjustmentCreate,
  AdjustmentObservationPage,
  AdjustmentPage,
} from '@/openapi/schemas/adjustment';
import { Job } from '@/openapi/schemas/job';
import { Id, Name, PageQuery } from '@/openapi/schemas/primitives';
import { LengthQuery } from '@/openapi/schemas/units';

export const createAdjustment = contract({
  id: 'createAdjustment',
  method: 'post',
  path: '/projects/{projectId}/adjustments',
  tag: 'Adjustments',
  summary: 'Adjust a network',
  description:
    'Adjusts points and setups together from stored observations, with one solution for all. It is a trial run: nothing of the control changes until it is applied. The answer is the job; its `result` leads to the adjustment.',
  access: 'adjustments:write',
  params: ProjectParams,
  body: { json: AdjustmentCreate },
  answers: {
    202: {
      description: 'The job.',
      json: Job,
      headers: { Location: 'Path of the job.', 'Retry-After': 'Seconds to wait before asking for it.' },
    },
  },
});

export const listAdjustments = contract({
  id: 'listAdjustments',
  method: 'get',
  path: '/projects/{projectId}/adjustments',
  tag: 'Adjustments',
  summary: 'List adjustments',
  description: 'Adjustments of a project with their jobs and verdicts, newest first.',
  access: 'adjustments:read',
  params: ProjectParams,
  query: PageQuery,
  answers: { 200: { description: 'A page of adjustments.', json: AdjustmentPage } },
  problems: ['cursor_invalid'],
});

export const getAdjustment = contract({
  id: 'getAdjustment',
  method: 'get',
  path: '/projects/{projectId}/adjustments/{adjustmentId}',
  tag: 'Adjustments',
  summary: 'Read an adjustment',
  description:
    'Verdict, tests, every point with its shift from the version in force, and what was taken out and why; `result` is null until the job has succeeded.',
  access: 'adjustments:read',
  params: AdjustmentParams,
  query: LengthQuery,
  answers: { 200: { description: 'The adjustment.', json: Adjustment } },
});

export const listAdjustmentObservations = contract({
  id: 'listAdjustmentObservations',
  method: 'get',
  path: '/projects/{projectId}/adjustments/{adjustmentId}/observations',
  tag: 'Adjustments',
  summary: 'List the observations of an adjustment',
  description:
    'Each with residual, redundancy, w and minimal detectable error, in the order of the computation.',
  access: 'adjustments:read',
  params: AdjustmentParams,
  query: z.strictObject({
    ...PageQuery.shape,
    ...LengthQuery.shape,
    point: Name.optional().meta({ description: 'Only observations from or to this point.' }),
    removed: Flag.meta({ description: 'true: only those that snooping took out; false: only the others.' }),
  }),
  answers: { 200: { description: 'A page of observations.', json: AdjustmentObservationPage } },
  problems: ['cursor_invalid', 'adjustment_not_finished'],
});

export const applyAdjustment = contract({
  id: 'applyAdjustment',
  method: 'post',
  path: '/projects/{projectId}/adjustments/{adjustmentId}/apply',
  tag: 'Adjustments',
  summary: 'Apply an adjustment to the control',
  description:
    'Makes new versions of the control points that were not held, with the adjusted coordinates and one standard deviation per axis: the larger axis of the ellipse in plan. Correlations between points are not kept. A fail cannot be applied; a hold needs a note and another person than who asked for it. Setups that are in force keep the versions that they were computed with.',
  access: 'control:write',
  params: AdjustmentParams,
  query: LengthQuery,
  body: { json: AdjustmentApply, optional: true },
  answers: { 200: { description: 'The new versions.', json: AdjustmentApplied } },
  problems: [
    'adjustment_not_finished',
    'adjustment_not_applicable',
    'adjustment_outdated',
    'second_person_wanted',
  ],
});

export const compareAdjustments = contract({
  id: 'compareAdjustments',
  method: 'get',
  path: '/projects/{projectId}/adjustments/{adjustmentId}/comparison',
  tag: 'Adjustments',
  summary: 'Compare two epochs',
  description:
    'Which common points moved between the adjustment `with` and this one, by the congruence of both networks; each is adjusted anew as a free network for it.',
  access: 'adjustments:read',
  params: AdjustmentParams,
  query: z.strictObject({
    ...LengthQuery.shape,
    with: Id.meta({ description: 'The earlier adjustment, of the same project.' }),
  }),
  answers: { 200: { description: 'What moved.', json: AdjustmentComparison } },
  problems: ['adjustment_not_finished', 'adjustment_not_computable', 'comparison_too_large'],
});
