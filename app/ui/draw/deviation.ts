import type * as z from 'zod';
import type { GradeCheck } from '@/openapi/schemas/gradeCheck';

export type GradeShot = z.output<typeof GradeCheck>;

/** Whether ground lies outside the tolerance as it was read; what can be said of it in earnest is its verdict. */
export function isOutside({ deviation, tolerance }: GradeShot): boolean {
  return deviation !== null && (deviation > tolerance.above || deviation < -tolerance.below);
}
