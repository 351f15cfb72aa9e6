import * as z from 'zod';
import { contract } from '@/openapi/contract';
import { AcknowledgementParams, Flag, ProjectParams, SetupParams } from '@/openapi/params';
import { Affected } from '@/openapi/schemas/affected';
import { Name, PageQuery, Verdict } from '@/openapi/schemas/primitives';
import {
  Acknowledgement,
  AcknowledgementAnswer,
  AcknowledgementPage,
  Pointings,
  RefitCreate,
  ReleaseCreate,
  Setup,
  SetupPage,
  SetupStatus,
  SetupWatch,
  Withdrawal,
  WithdrawCreate,
} from '@/openapi/schemas/setup';
import { LengthQuery } from '@/openapi/schemas/units';

export const listSetups = contract({
  id: 'listSetups',
  method: 'get',
  path: '/projects/{projectId}/setups',
  tag: 'Setups',
  summary: 'List setups',
  description: 'Computed setups, newest first.',
  access: 'setups:read',
  params: ProjectParams,
  query: z.strictObject({
    ...PageQuery.shape,
    ...LengthQuery.shape,
    verdict: Verdict.optional(),
    status: SetupStatus.optional(),
    station: Name.optional(),
  }),
  answers: { 200: { description: 'A page of setups.', json: SetupPage } },
  problems: ['cursor_invalid'],
});

export const getSetup = contract({
  id: 'getSetup',
  method: 'get',
  path: '/projects/{projectId}/setups/{setupId}',
  tag: 'Setups',
  summary: 'Read a setup',
  description:
    'Position, statistics, verdict with its reasons, checks since, and where every figure comes from.',
  access: 'setups:read',
  params: SetupParams,
  query: LengthQuery,
  answers: { 200: { description: 'The setup.', json: Setup } },
});

export const getSetupChecks = contract({
  id: 'getSetupChecks',
  method: 'get',
  path: '/projects/{projectId}/setups/{setupId}/checks',
  tag: 'Setups',
  summary: 'Checks of a setup over time',
  description:
    'All checks since the fit, oldest first, with their differences and the drift of the instrument by marks of the fit; when it last agreed, and until when it is valid.',
  access: 'setups:read',
  params: SetupParams,
  query: LengthQuery,
  answers: { 200: { description: 'The checks.', json: SetupWatch } },
});

export const getSetupAffected = contract({
  id: 'getSetupAffected',
  method: 'get',
  path: '/projects/{projectId}/setups/{setupId}/affected',
  tag: 'Setups',
  summary: 'What hangs on a setup',
  description:
    'Releases, bench checks and grade checks from this setup and its refits since its last check that agreed: what is affected where it is withdrawn or has moved.',
  access: 'setups:read',
  params: SetupParams,
  query: PageQuery,
  answers: { 200: { description: 'What is affected.', json: Affected } },
  problems: ['cursor_invalid'],
});

export const refitSetup = contract({
  id: 'refitSetup',
  method: 'post',
  path: '/projects/{projectId}/setups/{setupId}/refits',
  tag: 'Setups',
  summary: 'Refit a setup without some shots',
  description:
    'Makes a new setup that supersedes this one; what was left out stays visible, with the reason.',
  access: 'setups:write',
  params: SetupParams,
  query: LengthQuery,
  body: { json: RefitCreate },
  answers: { 201: { description: 'The new setup.', json: Setup } },
  problems: ['conflict'],
});

export const releaseSetup = contract({
  id: 'releaseSetup',
  method: 'post',
  path: '/projects/{projectId}/setups/{setupId}/release',
  tag: 'Setups',
  summary: 'Release a setup',
  description:
    'Puts a setup in force; with a machine it binds layer, surface and offset. A pass may be released by its submitter, a hold needs a note and another person, a fail cannot be released. Site rules, local codes and licensed practice decide; this record supports them and replaces none.',
  access: 'setups:release',
  params: SetupParams,
  query: LengthQuery,
  body: { json: ReleaseCreate },
  answers: { 200: { description: 'The setup, released.', json: Setup } },
  problems: ['setup_not_releasable', 'second_person_wanted'],
});

export const withdrawSetup = contract({
  id: 'withdrawSetup',
  method: 'post',
  path: '/projects/{projectId}/setups/{setupId}/withdraw',
  tag: 'Setups',
  summary: 'Withdraw a setup',
  description: 'Ends its force and opens an acknowledgement for each machine. It stops no machine: radio it.',
  access: 'setups:withdraw',
  params: SetupParams,
  query: LengthQuery,
  body: { json: WithdrawCreate, optional: true },
  answers: { 200: { description: 'The setup and what waits for an answer.', json: Withdrawal } },
  problems: ['setup_not_in_force'],
});

export const getPointings = contract({
  id: 'getPointings',
  method: 'get',
  path: '/projects/{projectId}/setups/{setupId}/pointings',
  tag: 'Setups',
  summary: 'Turn-to values of a setup',
  description:
    'Horizontal reading, zenith angle and true slope distance to every control point that is not quarantined.',
  access: 'setups:read',
  params: SetupParams,
  query: z.strictObject({
    ...LengthQuery.shape,
    targetHeight: z.coerce.number().min(-100).max(100).default(0).meta({
      type: 'number',
      description: 'In the unit of the answer.',
      example: 5,
    }),
  }),
  answers: { 200: { description: 'A pointing for each control point.', json: Pointings } },
});

export const listAcknowledgements = contract({
  id: 'listAcknowledgements',
  method: 'get',
  path: '/projects/{projectId}/acknowledgements',
  tag: 'Setups',
  summary: 'List acknowledgements',
  description: 'Withdrawals that machines’ crews have to answer, newest first.',
  access: 'acknowledgements:read',
  params: ProjectParams,
  query: z.strictObject({
    ...PageQuery.shape,
    open: Flag.meta({
      description: 'true: only those that still wait; false: only those that were answered.',
    }),
  }),
  answers: { 200: { description: 'A page of acknowledgements.', json: AcknowledgementPage } },
  problems: ['cursor_invalid'],
});

export const answerAcknowledgement = contract({
  id: 'answerAcknowledgement',
  method: 'post',
  path: '/projects/{projectId}/acknowledgements/{acknowledgementId}/acknowledge',
  tag: 'Setups',
  summary: 'Answer a withdrawal',
  description: 'Says that the machine’s crew knows and has stopped working from the setup.',
  access: 'acknowledgements:write',
  params: AcknowledgementParams,
  body: { json: AcknowledgementAnswer, optional: true },
  answers: { 200: { description: 'The acknowledgement.', json: Acknowledgement } },
  problems: ['already_answered'],
});
