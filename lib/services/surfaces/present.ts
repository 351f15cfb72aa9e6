import type { InferSelectModel } from 'drizzle-orm';
import type * as z from 'zod';
import type { surfaces } from '@/db/schema';
import type { Lengths } from '@/lib/services/lengths';
import { asMoment } from '@/lib/services/moments';
import type { Surface } from '@/openapi/schemas/design';

export type SurfaceRow = InferSelectModel<typeof surfaces>;

export function presentSurface(row: SurfaceRow, length: Lengths): z.output<typeof Surface> {
  const { minEasting, maxEasting, minNorthing, maxNorthing } = row;
  const placed = minEasting !== null && maxEasting !== null && minNorthing !== null && maxNorthing !== null;
  return {
    id: row.id,
    name: row.name,
    represents: row.represents,
    kind: row.kind,
    sha256: row.sha256.toString('hex'),
    points: row.points,
    triangles: row.triangles,
    extent: placed
      ? {
          minEasting: length.out(minEasting),
          maxEasting: length.out(maxEasting),
          minNorthing: length.out(minNorthing),
          maxNorthing: length.out(maxNorthing),
        }
      : null,
    units: { length: length.unit },
    createdAt: asMoment(row.createdAt),
  };
}
