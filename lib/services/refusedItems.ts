import type { ProblemItem } from '@/openapi/schemas/problem';

/** How many items of a submission were refused, each counted once however much is wrong with it. */
export function refusedItems(refused: readonly Pick<ProblemItem, 'pointer'>[]): number {
  return new Set(refused.map(({ pointer }) => pointer.split('/').slice(0, 3).join('/'))).size;
}
