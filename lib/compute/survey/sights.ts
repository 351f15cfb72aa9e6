import type { Erection, Reading, ReadingKind } from './faces';
import { offsetFromHeight, offsetFromZenith } from './ray';
import type { ControlMark } from './shots';
import type { Surroundings } from './surroundings';

/** What the first readings to a reflector say of the station, as far as it is needed to begin with. */
export interface Sight {
  mark: ControlMark;
  direction: number | null;
  /** Grid distance, m; near enough where the heights of both ends are not known. */
  grid: number | null;
  zenith: number | null;
  /** Elevation of the reflector; null where its mark has none. */
  reflector: number | null;
  /** Elevation of the tilting axis that zenith angle and distance lead to. */
  axis: number | null;
}

/** Sights to the marks of `control`; others are passed over. */
export function sightsOf(
  erections: readonly Erection[],
  readings: readonly Reading[],
  control: ReadonlyMap<string, ControlMark>,
  surroundings: Surroundings,
): Sight[] {
  const first = erections.map(() => ({}) as Partial<Record<ReadingKind, number>>);
  for (const { erection, kind, value } of readings) first[erection][kind] ??= value;
  const sights = erections.flatMap(
    ({ target, targetHeight }, index): (Sight & { slope: number | null })[] => {
      const mark = control.get(target);
      if (!mark) return [];
      const { direction = null, zenith = null, distance: slope = null } = first[index];
      const reflector = mark.elevation === null ? null : mark.elevation + targetHeight;
      const sight = { mark, direction, zenith, reflector, slope };
      if (slope === null || zenith === null) return [{ ...sight, grid: null, axis: null }];
      const offset = offsetFromZenith(zenith, slope, surroundings.refraction, surroundings);
      const axis = reflector === null ? null : reflector - offset.height;
      return [{ ...sight, grid: offset.grid, axis }];
    },
  );
  // Distances without a zenith angle are brought to the horizontal by the axis that the others give.
  const axis = median(sights.flatMap((sight) => sight.axis ?? []));
  return sights.map(({ slope, ...sight }) => {
    if (slope === null || sight.grid !== null) return sight;
    const height = axis === null || sight.reflector === null ? 0 : sight.reflector - axis;
    return { ...sight, grid: offsetFromHeight(height, slope, surroundings).grid };
  });
}

export function median(values: readonly number[]): number | null {
  if (values.length === 0) return null;
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length >> 1;
  return sorted.length % 2 === 1 ? sorted[middle] : (sorted[middle - 1] + sorted[middle]) / 2;
}
