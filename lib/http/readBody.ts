import { decompress, type RawBody } from '@/lib/formats/body';
import { Problem } from '@/lib/problem';

/**
 * Reads a body while counting, so that a long one ends the reading and not the memory.
 *
 * @param limit in bytes, of the body as it comes and of what it holds once decompressed
 * @throws Problem where it exceeds `limit` bytes or breaks off
 */
export async function readBody(request: Request, limit: number): Promise<RawBody> {
  const bytes = await readBytes(request, limit);
  const [mediaType, ...parameters] = (request.headers.get('content-type') ?? '').toLowerCase().split(';');
  const charset = parameters.map((p) => /^\s*charset\s*=\s*"?([^"\s]+)"?\s*$/.exec(p)?.[1]).find(Boolean);
  const encoding = request.headers.get('content-encoding')?.trim().toLowerCase();
  const contentEncoding = encoding && encoding !== 'identity' ? encoding : null;
  const content = decompress(bytes, contentEncoding, limit);
  // Whoever asks for the content meets the failure.
  content.catch(() => undefined);
  return {
    bytes,
    content,
    mediaType: mediaType.trim(),
    charset: charset ?? null,
    contentEncoding,
  };
}

async function readBytes(request: Request, limit: number): Promise<Uint8Array> {
  const tooLarge = () => new Problem('body_too_large', `Bodies here are limited to ${limit} bytes.`);
  const declared = request.headers.get('content-length');
  if (declared !== null && Number(declared) > limit) throw tooLarge();
  try {
    // The server lets no more through than was declared, so that only an undeclared length needs counting.
    if (declared !== null) return new Uint8Array(await request.arrayBuffer());
    const chunks: Uint8Array[] = [];
    let size = 0;
    for await (const chunk of (request.body ?? []) as AsyncIterable<Uint8Array>) {
      size += chunk.byteLength;
      if (size > limit) throw tooLarge();
      chunks.push(chunk);
    }
    return Buffer.concat(chunks, size);
  } catch (error) {
    if (error instanceof Problem) throw error;
    throw new Problem('body_unreadable', 'The body broke off before its end.');
  }
}
