import { contract } from '@/openapi/contract';
import { PersonParams } from '@/openapi/params';
import { Invitation, Person, PersonCreate, PersonPage, PersonPatch } from '@/openapi/schemas/access';
import { PageQuery } from '@/openapi/schemas/primitives';

export const listPeople = contract({
  id: 'listPeople',
  method: 'get',
  path: '/people',
  tag: 'People',
  summary: 'List people',
  description: 'Everybody of the organization, newest first.',
  access: 'people:read',
  organizationWide: true,
  query: PageQuery,
  answers: { 200: { description: 'A page of people.', json: PersonPage } },
  problems: ['cursor_invalid'],
});

export const createPerson = contract({
  id: 'createPerson',
  method: 'post',
  path: '/people',
  tag: 'People',
  summary: 'Invite a person',
  description:
    'Makes an account and an invitation, shown once, with which the person sets a password. Nobody gives a role that may do more than they.',
  access: 'people:write',
  organizationWide: true,
  body: { json: PersonCreate },
  secret: true,
  answers: { 201: { description: 'The person and the invitation.', json: Invitation } },
  problems: ['email_taken', 'secret_already_shown'],
});

export const getPerson = contract({
  id: 'getPerson',
  method: 'get',
  path: '/people/{personId}',
  tag: 'People',
  summary: 'Read a person',
  description: 'Name, address, role and state of an account.',
  access: 'people:read',
  organizationWide: true,
  params: PersonParams,
  answers: { 200: { description: 'The person.', json: Person } },
});

export const updatePerson = contract({
  id: 'updatePerson',
  method: 'patch',
  path: '/people/{personId}',
  tag: 'People',
  summary: 'Change a person',
  description:
    'Another name or role, or the account closed: its sessions end at once. Nobody changes a person who may do more than they, nor gives such a role.',
  access: 'people:write',
  organizationWide: true,
  params: PersonParams,
  body: { json: PersonPatch },
  answers: { 200: { description: 'The person.', json: Person } },
  problems: ['conflict'],
});

export const reinvitePerson = contract({
  id: 'reinvitePerson',
  method: 'post',
  path: '/people/{personId}/invitations',
  tag: 'People',
  summary: 'Invite again',
  description:
    'A new invitation, shown once; an earlier one ends. Also the way back from a lost password. Nobody invites a person who may do more than they.',
  access: 'people:write',
  organizationWide: true,
  params: PersonParams,
  secret: true,
  answers: { 201: { description: 'The person and the invitation.', json: Invitation } },
  problems: ['secret_already_shown'],
});
