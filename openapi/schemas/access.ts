import * as z from 'zod';
import { ROLES, SCOPE_NAMES } from '@/openapi/scopes';
import { Id, Instant, Moment, page, Title } from './primitives';

export const ScopeName = z.enum(SCOPE_NAMES).meta({ id: 'Scope' });
export const RoleName = z.enum(ROLES).meta({ id: 'Role' });
const Email = z.email().max(254);
const Password = z
  .string()
  .min(12)
  .max(200)
  .meta({ format: 'password', description: 'Twelve characters at least.' });

export const SignIn = z
  .strictObject({ email: z.string().min(1).max(254), password: z.string().min(1).max(200) })
  .meta({ id: 'SignIn', example: { email: 'lead@example.com', password: 'three quiet herons' } });

export const OrganizationCreate = z
  .strictObject({
    name: Title,
    administrator: z.strictObject({ name: Title, email: Email, password: Password }),
  })
  .meta({
    id: 'OrganizationCreate',
    example: {
      name: 'Larkspur Earthworks',
      administrator: { name: 'Ada Quill', email: 'ada@example.com', password: 'three quiet herons' },
    },
  });

export const Organization = z
  .object({ id: Id, name: z.string(), createdAt: Moment })
  .meta({ id: 'Organization' });

export const Whoami = z
  .object({
    kind: z.enum(['person', 'key']),
    name: z.string(),
    organization: z.object({ id: Id, name: z.string() }),
    personId: Id.meta({ description: 'The person, or the person responsible for the key.' }),
    role: RoleName.nullable(),
    scopes: z.array(ScopeName),
    projectIds: z.array(Id).nullable().meta({ description: 'Null = all projects.' }),
    expiresAt: Moment.nullable(),
  })
  .meta({ id: 'Whoami' });

export const HubState = z
  .object({
    empty: z.boolean().meta({ description: 'No organization yet: the first administrator can be made.' }),
  })
  .meta({ id: 'HubState' });

export const PersonCreate = z
  .strictObject({ name: Title, email: Email, role: RoleName })
  .meta({ id: 'PersonCreate', example: { name: 'Bo Reed', email: 'bo@example.com', role: 'surveyor' } });

export const PersonPatch = z
  .strictObject({
    name: Title.optional(),
    role: RoleName.optional(),
    status: z.enum(['active', 'closed']).optional(),
  })
  .meta({ id: 'PersonPatch', example: { role: 'inspector' } });

export const Person = z
  .object({
    id: Id,
    name: z.string(),
    email: z.string(),
    role: RoleName,
    status: z.enum(['invited', 'active', 'closed']),
    createdAt: Moment,
  })
  .meta({ id: 'Person' });

export const PersonPage = page('PersonPage', Person);

export const Invitation = z
  .object({
    person: Person,
    invitation: z
      .object({
        token: z.string(),
        path: z.string().meta({ example: '/invitation#token' }),
        expiresAt: Moment,
      })
      .meta({ description: 'Shown once.' }),
  })
  .meta({ id: 'Invitation' });

export const InvitationAcceptance = z
  .strictObject({ token: z.string().min(1).max(200), password: Password })
  .meta({ id: 'InvitationAcceptance', example: { token: 'hti_…', password: 'three quiet herons' } });

export const ApiKeyCreate = z
  .strictObject({
    name: Title,
    scopes: z.array(ScopeName).min(1),
    projectIds: z
      .array(Id)
      .min(1)
      .max(200)
      .nullable()
      .default(null)
      .meta({ description: 'Null = all projects.' }),
    responsiblePersonId: Id.optional().meta({ description: 'Counts as submitter; you by default.' }),
    expiresAt: Instant.optional(),
  })
  .meta({ id: 'ApiKeyCreate', example: { name: 'truck-2', scopes: ['uploads:write', 'setups:read'] } });

export const ApiKey = z
  .object({
    id: Id,
    name: z.string(),
    prefix: z.string().meta({ example: 'htk_9fK2xQ' }),
    scopes: z.array(ScopeName),
    projectIds: z.array(Id).nullable(),
    responsiblePersonId: Id,
    status: z.enum(['active', 'expired', 'revoked']),
    createdAt: Moment,
    expiresAt: Moment.nullable(),
    revokedAt: Moment.nullable(),
    lastUsedAt: Moment.nullable().meta({ description: 'To the minute.' }),
    successorId: Id.nullable(),
  })
  .meta({ id: 'ApiKey' });

export const ApiKeyPage = page('ApiKeyPage', ApiKey);

export const ApiKeySecret = z
  .object({ apiKey: ApiKey, secret: z.string().meta({ description: 'Shown once.', example: 'htk_9fK2xQ…' }) })
  .meta({ id: 'ApiKeySecret' });

export const ApiKeyRotate = z
  .strictObject({
    overlapMinutes: z
      .int()
      .min(0)
      .max(43_200)
      .meta({ description: 'How long the old key still works; 0 = not at all.' }),
  })
  .meta({ id: 'ApiKeyRotate', example: { overlapMinutes: 60 } });
