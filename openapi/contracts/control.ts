import * as z from 'zod';
import { contract } from '@/openapi/contract';
import { Flag, PointParams, ProjectParams } from '@/openapi/params';
import { Affected } from '@/openapi/schemas/affected';
import {
  ControlHistory,
  ControlPoint,
  ControlPointPage,
  ControlPointPatch,
  ControlPointSheet,
  ControlReceipt,
  ControlStatus,
  ControlSubmission,
} from '@/openapi/schemas/control';
import { PageQuery } from '@/openapi/schemas/primitives';
import { LengthQuery, LengthUnit } from '@/openapi/schemas/units';

export const createControlPoints = contract({
  id: 'createControlPoints',
  method: 'post',
  path: '/projects/{projectId}/control-points',
  tag: 'Control',
  summary: 'Bring in control',
  description:
    'Up to 5,000 points as JSON, or as CSV with a header row of the same names (then ?length= is required). Each point is accepted or refused on its own. The same name with other values is a new version, with ?revise=true only, and with confirmUnits too where the point would move by more than a metre. A new version keeps the status of its point: trust is given back by PATCH alone.',
  access: 'control:write',
  params: ProjectParams,
  query: z.strictObject({
    revise: Flag.meta({ description: 'Make new versions of points that exist with other values.' }),
    length: LengthUnit.optional().meta({ description: 'Unit of a CSV body.' }),
    confirmUnits: Flag.meta({
      description:
        'For a CSV body in the other foot than the project’s frame, or whose points would move by more than a metre.',
    }),
  }),
  body: { json: ControlSubmission, text: ['text/csv'], itemwise: ['points'], limit: 8 * 1024 * 1024 },
  answers: { 201: { description: 'What became of each point.', json: ControlReceipt } },
  problems: ['nothing_accepted'],
});

export const listControlPoints = contract({
  id: 'listControlPoints',
  method: 'get',
  path: '/projects/{projectId}/control-points',
  tag: 'Control',
  summary: 'List control points',
  description: 'The registry in its present versions, by name.',
  access: 'control:read',
  params: ProjectParams,
  query: z.strictObject({ ...PageQuery.shape, ...LengthQuery.shape, status: ControlStatus.optional() }),
  answers: { 200: { description: 'A page of control points.', json: ControlPointPage } },
  problems: ['cursor_invalid'],
});

export const getControlPoint = contract({
  id: 'getControlPoint',
  method: 'get',
  path: '/projects/{projectId}/control-points/{pointName}',
  tag: 'Control',
  summary: 'Read a control point',
  description:
    'Its present version, who said how far it is to be trusted, and what setups show of it. Asked in the unit it was sent in, it answers the very numbers that were sent.',
  access: 'control:read',
  params: PointParams,
  query: LengthQuery,
  answers: { 200: { description: 'The control point.', json: ControlPointSheet } },
});

export const updateControlPoint = contract({
  id: 'updateControlPoint',
  method: 'patch',
  path: '/projects/{projectId}/control-points/{pointName}',
  tag: 'Control',
  summary: 'Trust, suspect or quarantine a control point',
  description:
    'A quarantined point takes no part in new setups; it is never deleted. The hub itself suspects a trusted point that setups show to have moved, and never goes against what somebody has said here.',
  access: 'control:write',
  params: PointParams,
  query: LengthQuery,
  body: { json: ControlPointPatch },
  answers: { 200: { description: 'The control point.', json: ControlPoint } },
});

export const getControlPointHistory = contract({
  id: 'getControlPointHistory',
  method: 'get',
  path: '/projects/{projectId}/control-points/{pointName}/history',
  tag: 'Control',
  summary: 'History of a control point',
  description: 'All its versions, and what it showed in every setup that used it.',
  access: 'control:read',
  params: PointParams,
  query: LengthQuery,
  answers: { 200: { description: 'Versions and residuals.', json: ControlHistory } },
});

export const getControlPointAffected = contract({
  id: 'getControlPointAffected',
  method: 'get',
  path: '/projects/{projectId}/control-points/{pointName}/affected',
  tag: 'Control',
  summary: 'What hangs on a control point',
  description:
    'Setups that used it since it was last seen in its place, with their releases, bench checks and grade checks, and blades that were benched on it.',
  access: 'setups:read',
  params: PointParams,
  query: PageQuery,
  answers: { 200: { description: 'What is affected.', json: Affected } },
  problems: ['cursor_invalid'],
});
