import type * as z from 'zod';
import type { Setup } from '@/openapi/schemas/setup';

/** How a setup ended from which nobody may work any more: that comes before its verdict. */
export const SETUP_END = {
  withdrawn: { word: 'Withdrawn', tone: 'fail' },
  superseded: { word: 'Superseded', tone: 'fail' },
  expired: { word: 'Expired', tone: 'hold' },
} as const;
export type SetupEnd = keyof typeof SETUP_END;

/** Null while its verdict is what counts. */
export function endOf({ status }: Pick<z.output<typeof Setup>, 'status'>): SetupEnd | null {
  return status === 'computed' || status === 'released' ? null : status;
}
