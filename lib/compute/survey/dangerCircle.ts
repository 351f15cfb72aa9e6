import { type Circle, circleThrough, type Place } from './loci';

/** From directions alone a station on the circle through its marks is not determined: every place on it sees the same. */
export interface DangerCircle {
  circle: Circle;
  /** Of the station from the circle, m; positive outside. */
  distance: number;
  /** The marks that lie on it. */
  marks: string[];
}

/** Marks further from their common circle than this part of its radius do not make one (common practice). */
export const ON_CIRCLE = 0.1;
/** A station within this part of the radius stands near the circle (common practice). */
export const NEAR_CIRCLE = 0.1;
/** A position no better than this part of the radius, one standard deviation, is no position. */
export const UNDETERMINED = 0.05;

/** Null where the marks lie on one line, or on no common circle. */
export function dangerCircle(
  marks: readonly (Place & { name: string })[],
  station: Place,
): DangerCircle | null {
  const circle = circleThrough(marks);
  if (!circle) return null;
  const outside = ({ easting, northing }: Place) =>
    Math.hypot(easting - circle.easting, northing - circle.northing) - circle.radius;
  if (marks.some((mark) => Math.abs(outside(mark)) > ON_CIRCLE * circle.radius)) return null;
  return { circle, distance: outside(station), marks: marks.map(({ name }) => name) };
}

export function isNear({ circle, distance }: DangerCircle): boolean {
  return Math.abs(distance) < NEAR_CIRCLE * circle.radius;
}

/**
 * Whether a station is as good as on the circle. Its position is then so uncertain along the circle that neither the
 * solution nor its standard deviations, which are linear, mean anything.
 *
 * @param semiMajor of the standard ellipse, m
 */
export function isLost(danger: DangerCircle, semiMajor: number): boolean {
  return isNear(danger) && !(semiMajor < UNDETERMINED * danger.circle.radius);
}
