import type * as z from 'zod';
import type { Lengths } from '@/lib/services/lengths';
import { asMoment } from '@/lib/services/moments';
import type { Layer } from '@/openapi/schemas/design';
import type { LayerRow } from './load';

/** Both signs spelled out: where the layer lies from its surface. */
export function offsetText(offset: number, surfaceName: string, length: Lengths): string {
  if (offset === 0) return `on ${surfaceName}`;
  return `${length.text(Math.abs(offset))} ${offset < 0 ? 'below' : 'above'} ${surfaceName}`;
}

export function presentLayer(row: LayerRow, length: Lengths): z.output<typeof Layer> {
  return {
    name: row.name,
    version: row.version,
    surfaceId: row.surfaceId,
    surfaceSha256: row.surfaceSha256,
    surfaceName: row.surfaceName,
    represents: row.represents,
    offset: length.out(row.offset),
    offsetText: offsetText(row.offset, row.surfaceName, length),
    tolerance: { below: length.out(row.below), above: length.out(row.above), citation: row.citation },
    acceptance: row.acceptance,
    units: { length: length.unit },
    createdAt: asMoment(row.createdAt),
  };
}
