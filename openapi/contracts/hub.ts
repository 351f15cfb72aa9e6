import * as z from 'zod';
import { contract } from '@/openapi/contract';
import { HubState, Organization, OrganizationCreate, Whoami } from '@/openapi/schemas/access';

export const getDocument = contract({
  id: 'getDocument',
  method: 'get',
  path: '/openapi.json',
  tag: 'Hub',
  summary: 'This document',
  description: 'The OpenAPI document of the hub, as the reference page shows it.',
  access: 'public',
  answers: {
    200: {
      description: 'The document.',
      json: z.looseObject({ openapi: z.string() }).meta({ id: 'Document' }),
    },
  },
});

export const getHub = contract({
  id: 'getHub',
  method: 'get',
  path: '/hub',
  tag: 'Hub',
  summary: 'Whether the hub is still empty',
  description: 'An empty hub waits for its first administrator.',
  access: 'public',
  answers: { 200: { description: 'The state.', json: HubState } },
});

export const createOrganization = contract({
  id: 'createOrganization',
  method: 'post',
  path: '/organizations',
  tag: 'Hub',
  summary: 'Make the first organization and its administrator',
  description: 'Works once, on an empty hub, and signs the administrator in.',
  access: 'public',
  body: { json: OrganizationCreate },
  answers: { 201: { description: 'The organization; a session cookie comes with it.', json: Organization } },
  problems: ['hub_not_empty', 'email_taken'],
});

export const whoami = contract({
  id: 'whoami',
  method: 'get',
  path: '/whoami',
  tag: 'Hub',
  summary: 'Who is asking',
  description: 'The person or key behind the request, with its scopes and projects.',
  access: 'signedIn',
  answers: { 200: { description: 'The actor.', json: Whoami } },
});
