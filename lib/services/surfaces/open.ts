import { and, eq } from 'drizzle-orm';
import { surfaceData } from '@/db/schema';
import type { Tenant } from '@/db/tenant';
import type { Surface } from '@/lib/compute/grade/surface';
import { surfaceFromBytes } from '@/lib/compute/grade/surfaceBytes';

const KEPT = 8;

/** Surfaces lately used, under organization and hash: content never changes, so neither does an entry. */
const open = new Map<string, Surface>();

/** Opens a surface by its hash. */
export async function openSurface(tenant: Tenant, organizationId: string, sha256: string): Promise<Surface> {
  const key = `${organizationId}/${sha256}`;
  let surface = open.get(key);
  if (surface) open.delete(key);
  else {
    const [row] = await tenant.db
      .select({ bytes: surfaceData.bytes })
      .from(surfaceData)
      .where(
        and(
          eq(surfaceData.organizationId, organizationId),
          eq(surfaceData.sha256, Buffer.from(sha256, 'hex')),
        ),
      );
    surface = surfaceFromBytes(row.bytes);
  }
  // The least lately used stands first and goes first.
  open.set(key, surface);
  if (open.size > KEPT) open.delete(open.keys().next().value!);
  return surface;
}
