import type { InferSelectModel } from 'drizzle-orm';
import type * as z from 'zod';
import type { rawBodies, uploads } from '@/db/schema';
import { asMoment } from '@/lib/services/moments';
import type { Upload } from '@/openapi/schemas/upload';

export type UploadRow = InferSelectModel<typeof uploads>;
/** What a receipt tells of a raw body. */
export type RawFacts = Omit<InferSelectModel<typeof rawBodies>, 'bytes' | 'contentSha256'> & { size: number };

export function presentUpload(row: UploadRow, raw: RawFacts): z.output<typeof Upload> {
  return {
    id: row.id,
    clientId: row.clientId,
    status: row.status,
    sha256: raw.sha256.toString('hex'),
    size: raw.size,
    mediaType: raw.mediaType,
    contentEncoding: raw.contentEncoding,
    receivedAt: asMoment(row.receivedAt),
    sender: row.actorName,
    counts: { accepted: row.accepted, refused: row.refused },
  };
}
