import {
  OpenAPIRegistry,
  OpenApiGeneratorV31,
  type ResponseConfig,
  type RouteConfig,
} from '@asteasolutions/zod-to-openapi';
import * as z from 'zod';
import { API_BASE } from './base';
import type { Contract } from './contract';
import { CONTRACTS } from './contracts';
import { REQUEST_PROBLEMS, type RequestProblemCode } from './problemCodes';
import { Id } from './schemas/primitives';
import { Problem } from './schemas/problem';
import { WebhookMessage } from './schemas/webhook';
import { SCOPES } from './scopes';

const VERSION = '1.0.0';

const TAGS: Record<string, string> = {
  Hub: 'The hub itself and who is asking.',
  Access: 'Signing in and out.',
  People: 'People and their roles.',
  'API keys': 'Keys for devices and programs.',
  Projects: 'Units, frame and limits of a site.',
  Instruments: 'Instruments, machines and their stated accuracy.',
  Control: 'Control points, their versions and their health.',
  Uploads: 'Observations as they came.',
  Setups: 'Computed setups: verdict, release, withdrawal.',
  'Surfaces and layers': 'The design that ground is checked against.',
  Grade: 'Checks of ground and of blades.',
  Levelling: 'Level runs, their closure, and tests of the levels.',
  Adjustments: 'Networks adjusted from stored observations; applied to the control when a surveyor says so.',
  Jobs: 'Work that takes longer than a request.',
  Record: 'What happened and who did it.',
  Webhooks: 'Addresses that are told what happens, and what became of each message.',
};

const DESCRIPTION = `Hubtack takes raw observations in, keeps them, computes, and hands results out.

Coordinates are named easting, northing and elevation. Azimuths and horizontal readings run clockwise, azimuths from grid north. Deviation of ground from design is vertical and positive where ground is high (cut). No unit is assumed: every submission declares its own, every answer states its own. Errors are problem documents (RFC 9457); each code has a page under /reference/problems. How every figure is computed stands under /reference/methods; a result's \`provenance.method\` is the name of its page there.

Results support the judgement of the people on site. Site rules, local codes and licensed practice decide.`;

/** Problems that an operation may answer, by status. */
export function problemsOf(operation: Contract): RequestProblemCode[] {
  const codes: RequestProblemCode[] = [
    'url_malformed',
    ...(operation.problems ?? []),
    'internal',
    'unavailable',
  ];
  if (operation.access !== 'public') codes.push('unauthenticated', 'forbidden');
  if (operation.params) codes.push('not_found');
  if (operation.query || operation.body) codes.push('invalid');
  if (operation.body) codes.push('body_unreadable', 'body_too_large', 'media_type_unsupported');
  if (operation.method === 'post') codes.push('request_in_progress', 'idempotency_mismatch');
  return [...new Set(codes)];
}

function problemAnswers(operation: Contract): Record<string, ResponseConfig> {
  const byStatus = new Map<number, RequestProblemCode[]>();
  for (const code of problemsOf(operation)) {
    const { status } = REQUEST_PROBLEMS[code];
    byStatus.set(status, [...(byStatus.get(status) ?? []), code]);
  }
  return Object.fromEntries(
    [...byStatus]
      .sort(([a], [b]) => a - b)
      .map(([status, codes]) => [
        String(status),
        {
          description: codes.map((code) => `\`${code}\`: ${REQUEST_PROBLEMS[code].title}.`).join(' '),
          content: { 'application/problem+json': { schema: Problem } },
        },
      ]),
  );
}

function successAnswers(operation: Contract): Record<string, ResponseConfig> {
  return Object.fromEntries(
    Object.entries(operation.answers).map(([status, { description, json, media, headers }]) => {
      if (json) {
        const content = { 'application/json': { schema: json } };
        return [status, { description, content, ...(headers ? { headers: headersOf(headers) } : {}) }];
      }
      if (media) return [status, { description, content: { [media]: { schema: schemaOfMedia(media) } } }];
      return [status, { description }];
    }),
  );
}

/** What is posted to the endpoints that want it. */
const EVENT_WEBHOOK: RouteConfig = {
  method: 'post',
  path: 'event',
  operationId: 'receiveEvent',
  tags: ['Webhooks'],
  summary: 'Something has happened',
  description:
    'Posted to webhook endpoints, signed after the Standard Webhooks specification 1.0.0 over `id.timestamp.body`. It may come twice and out of order; its webhook-id is the event’s own id.',
  security: [],
  request: {
    headers: z.object({
      'webhook-id': Id,
      'webhook-timestamp': z.string().meta({ description: 'Seconds since 1970.', example: '1934984400' }),
      'webhook-signature': z
        .string()
        .meta({ description: 'One for each secret that holds, with a space between.', example: 'v1,K5oZ…' }),
    }),
    body: { required: true, content: { 'application/json': { schema: WebhookMessage } } },
  },
  responses: {
    '2XX': { description: 'It has arrived.' },
    '410': { description: 'No more messages are wanted: the endpoint is switched off.' },
  },
};

/** Text is text; the rest is bytes. */
function schemaOfMedia(media: string) {
  return media.startsWith('text/')
    ? { type: 'string' as const }
    : { type: 'string' as const, format: 'binary' };
}

function headersOf(headers: Readonly<Record<string, string>>) {
  const described = Object.entries(headers).map(([name, description]) => [
    name,
    { description, schema: { type: 'string' as const } },
  ]);
  return Object.fromEntries(described);
}

function requestBody({ body }: Contract) {
  if (!body) return undefined;
  const content: Record<string, object> = {};
  if (body.json) content['application/json'] = { schema: body.json };
  for (const media of body.text ?? []) content[media] = { schema: { type: 'string' } };
  return { content, required: !body.optional };
}

/** The OpenAPI 3.1 document, made of the contracts. */
export function buildDocument() {
  const registry = new OpenAPIRegistry();
  registry.registerComponent('securitySchemes', 'bearer', {
    type: 'http',
    scheme: 'bearer',
    description: 'An API key: `htk_…`.',
  });
  registry.registerComponent('securitySchemes', 'session', {
    type: 'apiKey',
    in: 'cookie',
    name: 'hubtack_session',
    description: 'The console’s session; writes must come from the hub’s own pages.',
  });
  for (const operation of CONTRACTS) {
    const scope = operation.access in SCOPES ? `\n\nScope: \`${operation.access}\`.` : '';
    const reach = operation.organizationWide ? ' Not for keys that are bound to projects.' : '';
    registry.registerPath({
      method: operation.method,
      path: operation.path,
      operationId: operation.id,
      tags: [operation.tag],
      summary: operation.summary,
      description: operation.description + scope + reach,
      security: operation.access === 'public' ? [] : [{ bearer: [] }, { session: [] }],
      request: {
        params: operation.params,
        query: operation.query,
        headers: operation.headers,
        body: requestBody(operation),
      },
      responses: { ...successAnswers(operation), ...problemAnswers(operation) },
    });
  }
  registry.registerWebhook(EVENT_WEBHOOK);
  return new OpenApiGeneratorV31(registry.definitions).generateDocument({
    openapi: '3.1.0',
    info: {
      title: 'Hubtack',
      version: VERSION,
      description: DESCRIPTION,
      license: { name: 'Proprietary', identifier: 'LicenseRef-Proprietary' },
    },
    servers: [{ url: API_BASE }],
    tags: Object.entries(TAGS).map(([name, description]) => ({ name, description })),
  });
}
