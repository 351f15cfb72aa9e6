import type { InferSelectModel } from 'drizzle-orm';
import type * as z from 'zod';
import type { rawBodies, uploads } from '@/db/schema';
import { asMoment } from '@/lib/services/moments';
import type { Upload } from '@/openapi/schemas/upload';

export type UploadRow = InferSelectModel<typeof uploads>;
/** A raw body without its bytes. */
export type RawFacts = Omit<InferSelectModel<typeof rawBodies>, 'bytes'> & { size: number };

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

/** Items that were refused, counted once each however much was wrong with them. */
export function refusedItems(pointers: readonly string[]): number {
  return new Set(pointers.map((pointer) => pointer.split('/').slice(0, 3).join('/'))).size;
}
