import * as z from 'zod';
import { contract } from '@/openapi/contract';
import { Flag, ProjectParams, UploadParams } from '@/openapi/params';
import { ClientId, Instant, Name, PageQuery } from '@/openapi/schemas/primitives';
import { LengthQuery } from '@/openapi/schemas/units';
import { Receipt, UploadDocument, UploadPage } from '@/openapi/schemas/upload';

export const UPLOAD_LIMIT = 16 * 1024 * 1024;

export const createUpload = contract({
  id: 'createUpload',
  method: 'post',
  path: '/projects/{projectId}/uploads',
  tag: 'Uploads',
  summary: 'Post observations',
  description:
    'Setups, checks, grade shots, bench checks, level runs and two-peg tests as they were observed. The bytes are kept as they came, whatever becomes of them; each item is accepted or refused on its own, and the answer says which. Posting the same document again is harmless, compressed anew or not at all. A single level run may come as `text/csv`, a line of the book a row under the header point, backsight, backsightDistance, intermediate, intermediateDistance, foresight, foresightDistance, bookedElevation (the last five as wanted), with ?length= and ?clientId=.',
  access: 'uploads:write',
  params: ProjectParams,
  query: z.strictObject({
    ...LengthQuery.shape,
    clientId: ClientId.optional().meta({ description: 'Of a level book as text/csv: required there.' }),
    instrument: Name.optional().meta({ description: 'The level, of a level book as text/csv.' }),
    observedAt: Instant.optional().meta({ description: 'When, of a level book as text/csv.' }),
    confirmUnits: Flag.meta({ description: 'As in the document, of a level book as text/csv.' }),
  }),
  body: { json: UploadDocument, text: ['text/csv'], raw: true, limit: UPLOAD_LIMIT },
  answers: {
    201: { description: 'Received, kept and computed.', json: Receipt },
    200: { description: 'The same upload came before: its first receipt.', json: Receipt },
  },
  problems: ['nothing_accepted', 'upload_conflict', 'json_too_deep'],
});

export const listUploads = contract({
  id: 'listUploads',
  method: 'get',
  path: '/projects/{projectId}/uploads',
  tag: 'Uploads',
  summary: 'List uploads',
  description: 'Everything that was sent in, refused bodies included, newest first.',
  access: 'uploads:read',
  params: ProjectParams,
  query: z.strictObject({ ...PageQuery.shape, status: z.enum(['processed', 'refused']).optional() }),
  answers: { 200: { description: 'A page of uploads.', json: UploadPage } },
  problems: ['cursor_invalid'],
});

export const getUpload = contract({
  id: 'getUpload',
  method: 'get',
  path: '/projects/{projectId}/uploads/{uploadId}',
  tag: 'Uploads',
  summary: 'Read a receipt',
  description: 'The receipt as it was first answered, refused items with their pointers included.',
  access: 'uploads:read',
  params: UploadParams,
  query: LengthQuery,
  answers: { 200: { description: 'The receipt.', json: Receipt } },
});

export const getUploadRaw = contract({
  id: 'getUploadRaw',
  method: 'get',
  path: '/projects/{projectId}/uploads/{uploadId}/raw',
  tag: 'Uploads',
  summary: 'The exact bytes of an upload',
  description: 'As they came, compressed where they came compressed; always an attachment.',
  access: 'uploads:read',
  params: UploadParams,
  answers: { 200: { description: 'The bytes.', media: 'application/octet-stream' } },
});
