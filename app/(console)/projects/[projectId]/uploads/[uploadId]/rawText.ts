'use client';

import { useQuery } from '@tanstack/react-query';
import type * as z from 'zod';
import { address } from '@/app/ui/data/call';
import type { Upload } from '@/openapi/schemas/upload';

/** Above this many bytes the text is not laid out; it can be saved. */
const MOST_SHOWN = 4 * 1024 * 1024;

export interface RawText {
  /** Null where the bytes are not text that can be shown here. */
  text: string | null;
  why: string;
}

/** The bytes of an upload as text, decompressed where they came compressed. */
export function useRawText(projectId: string, upload: z.output<typeof Upload> | undefined) {
  return useQuery({
    queryKey: ['raw', upload?.id],
    enabled: upload !== undefined,
    staleTime: Number.POSITIVE_INFINITY,
    queryFn: () => read(projectId, upload!),
  });
}

async function read(projectId: string, upload: z.output<typeof Upload>): Promise<RawText> {
  const refuse = (why: string): RawText => ({ text: null, why });
  if (upload.size > MOST_SHOWN) return refuse('It is too large to be laid out here.');
  const path = '/projects/{projectId}/uploads/{uploadId}/raw';
  const response = await fetch(address(path, { projectId, uploadId: upload.id }));
  if (!response.ok || !response.body) throw new Error(`The bytes could not be read (${response.status}).`);
  const { contentEncoding } = upload;
  if (contentEncoding !== null && contentEncoding !== 'gzip')
    return refuse(`Its encoding, ${contentEncoding}, is not laid out here.`);
  try {
    const stream = contentEncoding
      ? response.body.pipeThrough(new DecompressionStream('gzip'))
      : response.body;
    const bytes = await new Response(stream).arrayBuffer();
    return { text: new TextDecoder('utf-8', { fatal: true }).decode(bytes), why: '' };
  } catch {
    return refuse('The bytes are not text.');
  }
}
