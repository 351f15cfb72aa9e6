import { promisify } from 'node:util';
import { gunzip } from 'node:zlib';

const inflate = promisify(gunzip);

export class BodyError extends Error {
  override readonly name = 'BodyError';

  constructor(
    readonly code: 'body_unreadable' | 'body_too_large' | 'media_type_unsupported',
    message: string,
  ) {
    super(message);
  }
}

/** A body as it came. */
export interface RawBody {
  bytes: Uint8Array;
  /** The bytes, decompressed where they came compressed; fails with a BodyError. */
  content: Promise<Uint8Array>;
  /** Media type without parameters, in lower case; empty where none was declared. */
  mediaType: string;
  charset: string | null;
  contentEncoding: string | null;
}

/**
 * The text of a body: decoded as UTF-8, without a byte-order mark.
 *
 * @throws BodyError
 */
export async function bodyText(body: RawBody): Promise<string> {
  if (body.charset !== null && body.charset !== 'utf-8') {
    throw new BodyError(
      'media_type_unsupported',
      `Text is taken as UTF-8, not as ${body.charset.slice(0, 40)}.`,
    );
  }
  const bytes = await body.content;
  try {
    return new TextDecoder('utf-8', { fatal: true }).decode(bytes);
  } catch {
    throw new BodyError('body_unreadable', 'The text is not UTF-8.');
  }
}

/**
 * Bytes as they were before they were compressed, within `limit` of them.
 *
 * @throws BodyError
 */
export async function decompress(
  bytes: Uint8Array,
  contentEncoding: string | null,
  limit: number,
): Promise<Uint8Array> {
  if (contentEncoding === null) return bytes;
  if (contentEncoding !== 'gzip') {
    throw new BodyError(
      'media_type_unsupported',
      `Bodies come as they are or as gzip, not as ${contentEncoding.slice(0, 40)}.`,
    );
  }
  try {
    return await inflate(bytes, { maxOutputLength: limit });
  } catch (error) {
    if ((error as NodeJS.ErrnoException).code === 'ERR_BUFFER_TOO_LARGE') {
      throw new BodyError('body_too_large', `Decompressed it is larger than ${limit} bytes.`);
    }
    throw new BodyError('body_unreadable', 'The gzip stream is broken or cut short.');
  }
}
