import { contract } from '@/openapi/contract';
import { ApiKeyParams } from '@/openapi/params';
import { ApiKey, ApiKeyCreate, ApiKeyPage, ApiKeyRotate, ApiKeySecret } from '@/openapi/schemas/access';
import { PageQuery } from '@/openapi/schemas/primitives';

export const listApiKeys = contract({
  id: 'listApiKeys',
  method: 'get',
  path: '/api-keys',
  tag: 'API keys',
  summary: 'List API keys',
  description:
    'All keys of the organization, newest first, revoked ones included. Secrets are never shown again.',
  access: 'keys:read',
  query: PageQuery,
  answers: { 200: { description: 'A page of keys.', json: ApiKeyPage } },
  problems: ['cursor_invalid'],
});

export const createApiKey = contract({
  id: 'createApiKey',
  method: 'post',
  path: '/api-keys',
  tag: 'API keys',
  summary: 'Make an API key',
  description: 'One key per device or program. The secret is shown once; only its hash is kept.',
  access: 'keys:write',
  body: { json: ApiKeyCreate },
  secret: true,
  answers: { 201: { description: 'The key and its secret.', json: ApiKeySecret } },
  problems: ['secret_already_shown'],
});

export const getApiKey = contract({
  id: 'getApiKey',
  method: 'get',
  path: '/api-keys/{apiKeyId}',
  tag: 'API keys',
  summary: 'Read an API key',
  description: 'Scopes, projects, responsible person, state and last use.',
  access: 'keys:read',
  params: ApiKeyParams,
  answers: { 200: { description: 'The key.', json: ApiKey } },
});

export const revokeApiKey = contract({
  id: 'revokeApiKey',
  method: 'post',
  path: '/api-keys/{apiKeyId}/revoke',
  tag: 'API keys',
  summary: 'Revoke an API key',
  description: 'It ends at once: the next request with it is refused.',
  access: 'keys:write',
  params: ApiKeyParams,
  answers: { 200: { description: 'The key.', json: ApiKey } },
});

export const rotateApiKey = contract({
  id: 'rotateApiKey',
  method: 'post',
  path: '/api-keys/{apiKeyId}/rotate',
  tag: 'API keys',
  summary: 'Rotate an API key',
  description:
    'A successor with the same scopes and projects; the old key works on for the overlap you choose.',
  access: 'keys:write',
  params: ApiKeyParams,
  body: { json: ApiKeyRotate },
  secret: true,
  answers: { 201: { description: 'The successor and its secret.', json: ApiKeySecret } },
  problems: ['conflict', 'secret_already_shown'],
});
