import type * as z from 'zod';
import type { Upload } from '@/openapi/schemas/upload';
import type { Tone } from './State';

/** What became of an upload, in a word. */
export function uploadState({ status, counts }: Pick<z.output<typeof Upload>, 'status' | 'counts'>): {
  tone: Tone;
  word: string;
} {
  if (status === 'refused') return { tone: 'fail', word: 'refused' };
  return counts.refused > 0
    ? { tone: 'hold', word: `${counts.refused} refused` }
    : { tone: 'pass', word: 'taken in' };
}
