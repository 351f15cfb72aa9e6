import { type PlaneDefinition, planeSurface, type Surface } from './surface';
import { type Tin, tinSurface } from './tin';

/**
 * A surface as bytes, so that equal content has equal bytes and an equal hash: a tag of 8 bytes, then, little-endian,
 * for a plane five doubles (easting, northing, elevation, azimuth, slope), for a TIN two 32-bit counts, the points as
 * doubles and the triangles as 32-bit indices.
 */
const PLANE = 'htplane1';
const TIN = 'httinsf1';
const HEADER = 16;

export type SurfaceContent = { kind: 'plane'; plane: PlaneDefinition } | { kind: 'tin'; tin: Tin };

export function surfaceBytes(content: SurfaceContent): Uint8Array {
  if (content.kind === 'plane') {
    const { easting, northing, elevation, azimuth, slope } = content.plane;
    const bytes = tagged(PLANE, 8 + 5 * 8);
    const view = new DataView(bytes.buffer);
    [easting, northing, elevation, azimuth, slope].forEach((value, i) => {
      view.setFloat64(8 + 8 * i, value, true);
    });
    return bytes;
  }
  const { points, triangles } = content.tin;
  const bytes = tagged(TIN, HEADER + points.byteLength + triangles.byteLength);
  const view = new DataView(bytes.buffer);
  view.setUint32(8, points.length / 3, true);
  view.setUint32(12, triangles.length / 3, true);
  new Float64Array(bytes.buffer, HEADER, points.length).set(points);
  new Uint32Array(bytes.buffer, HEADER + points.byteLength, triangles.length).set(triangles);
  return bytes;
}

/** @throws Error where the bytes are no surface: they were written by us, so something is broken */
export function surfaceFromBytes(stored: Uint8Array): Surface {
  // A copy of its own, so that the typed arrays are aligned.
  const bytes = stored.slice();
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const tag = new TextDecoder('latin1').decode(bytes.subarray(0, 8));
  if (tag === PLANE) {
    const [easting, northing, elevation, azimuth, slope] = [0, 1, 2, 3, 4].map((i) =>
      view.getFloat64(8 + 8 * i, true),
    );
    return planeSurface({ easting, northing, elevation, azimuth, slope });
  }
  if (tag !== TIN) throw new Error('These bytes are no surface.');
  const points = view.getUint32(8, true) * 3;
  const triangles = view.getUint32(12, true) * 3;
  const start = bytes.byteOffset + HEADER;
  return tinSurface({
    points: new Float64Array(bytes.buffer, start, points),
    triangles: new Uint32Array(bytes.buffer, start + points * 8, triangles),
  });
}

function tagged(tag: string, length: number): Uint8Array<ArrayBuffer> {
  const bytes = new Uint8Array(length);
  for (let i = 0; i < tag.length; i++) bytes[i] = tag.charCodeAt(i);
  return bytes;
}
