/** A displacement or its standard deviations, m; no elevation where the mark has none, or where none is asked for. */
export interface Place {
  easting: number;
  northing: number;
  elevation: number | null;
}

/** What a displacement has a length along. */
const AXES = ['easting', 'northing', 'elevation'] as const;

/** Standard deviations within which a mark agrees with its place, and beyond which it does not: 95 %, common practice. */
const TWO_SIGMA = 2;

export function placeOf(values: ArrayLike<number>, first: number, axes: number, step = 1): Place {
  return {
    easting: values[first],
    northing: values[first + step],
    elevation: axes === 3 ? values[first + 2 * step] : null,
  };
}

/** The lengths along which a displacement stands out of its σ, zero for the others; all of it where none does alone. */
export function axesMoved(displacement: Place, sigma: Place): Place {
  const size = (axis: (typeof AXES)[number]) => Math.abs(displacement[axis] ?? 0);
  const stands = AXES.filter((axis) => size(axis) > TWO_SIGMA * (sigma[axis] ?? 0));
  const lengthOf = (axis: (typeof AXES)[number]) =>
    stands.length === 0 || stands.includes(axis) ? size(axis) : 0;
  return { easting: lengthOf('easting'), northing: lengthOf('northing'), elevation: lengthOf('elevation') };
}

/** Whether such standard deviations show lengths as these: 2σ within each that is asked for. */
export function sees(sigma: Place, wanted: Place): boolean {
  return AXES.every((axis) => {
    const length = wanted[axis];
    if (!length) return true;
    const deviation = sigma[axis];
    return deviation !== null && TWO_SIGMA * deviation <= length;
  });
}

/** Whether a sighting that could have seen the mark so far off found it in its place: within 2σ along every axis. */
export function isInPlace(
  { difference, sigma }: { difference: Place | null; sigma: Place | null },
  wanted: Place,
): boolean {
  if (!difference || !sigma || !sees(sigma, wanted)) return false;
  return AXES.every((axis) => Math.abs(difference[axis] ?? 0) <= TWO_SIGMA * (sigma[axis] ?? 0));
}
