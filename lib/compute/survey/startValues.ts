import type { Erection, Reading, ReadingKind } from './faces';
import { offsetFromHeight, offsetFromZenith } from './ray';
import type { ControlMark } from './shots';
import type { Surroundings } from './surroundings';

export interface StartValues {
  easting: number;
  northing: number;
  /** Of the tilting axis. */
  elevation: number;
  orientation: number;
}

/**
 * Start values of a resection from two or more marks with direction and distance, for any orientation: the rigid
 * motion that lays the polar picture of the marks onto their coordinates (closed form, two-dimensional case of
 * Umeyama 1991). Null where fewer than two distinct marks carry both.
 */
export function startValues(
  erections: readonly Erection[],
  readings: readonly Reading[],
  control: ReadonlyMap<string, ControlMark>,
  surroundings: Surroundings,
): StartValues | null {
  const first = (erection: number, kind: ReadingKind) =>
    readings.find((reading) => reading.erection === erection && reading.kind === kind)?.value ?? null;
  const seen: { east: number; north: number; mark: ControlMark; axis: number | null }[] = [];
  erections.forEach((erection, index) => {
    const mark = control.get(erection.target);
    const direction = first(index, 'direction');
    const slope = first(index, 'distance');
    const zenith = first(index, 'zenith');
    if (!mark || direction === null || slope === null) return;
    const offset =
      zenith === null
        ? offsetFromHeight(0, slope, surroundings)
        : offsetFromZenith(zenith, slope, surroundings.refraction, surroundings);
    const reflector = mark.elevation === null ? null : mark.elevation + erection.targetHeight;
    seen.push({
      east: offset.grid * Math.sin(direction),
      north: offset.grid * Math.cos(direction),
      mark,
      axis: reflector === null || zenith === null ? null : reflector - offset.height,
    });
  });
  if (new Set(seen.map(({ mark }) => mark.name)).size < 2) return null;

  const centre = { east: mean(seen.map((s) => s.east)), north: mean(seen.map((s) => s.north)) };
  const target = {
    east: mean(seen.map((s) => s.mark.easting)),
    north: mean(seen.map((s) => s.mark.northing)),
  };
  let sine = 0;
  let cosine = 0;
  for (const { east, north, mark } of seen) {
    const [pe, pn] = [east - centre.east, north - centre.north];
    const [qe, qn] = [mark.easting - target.east, mark.northing - target.north];
    sine += qe * pn - qn * pe;
    cosine += qe * pe + qn * pn;
  }
  if (sine === 0 && cosine === 0) return null;
  const orientation = Math.atan2(sine, cosine);
  const [s, c] = [Math.sin(orientation), Math.cos(orientation)];
  const axes = seen.flatMap(({ axis }) => axis ?? []);
  return {
    easting: target.east - (c * centre.east + s * centre.north),
    northing: target.north - (c * centre.north - s * centre.east),
    elevation: axes.length > 0 ? mean(axes) : 0,
    orientation,
  };
}

function mean(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}
