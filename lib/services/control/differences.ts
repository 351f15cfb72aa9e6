import type { InferInsertModel } from 'drizzle-orm';
import type { controlPointVersions } from '@/db/schema';

type Version = InferInsertModel<typeof controlPointVersions>;

/** A tenth of a micrometre: what is left of a coordinate after a round trip through another unit. */
const SAME = 1e-7;

/** The fields in which two versions of a point differ, by the names under which they are sent. */
export function differences(before: Version, after: Version): string[] {
  return [
    ...(['easting', 'northing', 'elevation'] as const).filter((field) => !close(before[field], after[field])),
    ...(sameSigma(before, after) ? [] : ['sigma']),
    ...(['kind', 'description'] as const).filter((field) => before[field] !== after[field]),
  ];
}

/** Accuracy that was left to the project is the same whatever the project's default became since. */
function sameSigma(before: Version, after: Version): boolean {
  if (!before.submitted.sigma || !after.submitted.sigma)
    return before.submitted.sigma === after.submitted.sigma;
  return (
    close(before.sigmaHorizontal, after.sigmaHorizontal) && close(before.sigmaVertical, after.sigmaVertical)
  );
}

function close(a: number | null | undefined, b: number | null | undefined): boolean {
  return a == null || b == null ? a === b : Math.abs(a - b) < SAME;
}
