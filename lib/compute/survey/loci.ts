/**
 * Where a station can stand, by one observation each: on the circle around a mark at a measured distance, or on the
 * circle through two marks from which they are seen under a measured angle (the inscribed angle, Euclid III.21). Any
 * two loci meet in a station; with three directions that is Cassini's resection (1669).
 */

export interface Place {
  easting: number;
  northing: number;
}

export interface Circle extends Place {
  radius: number;
}

/** Angles nearer than this to 0 or a half turn put the station on the marks' own line: a circle of great radius. */
const FLATTEST_ANGLE = 1e-7;
/** Centres nearer than this part of the radius belong to one and the same circle. */
const SAME_CIRCLE = 1e-10;

/**
 * Places from which `right` is seen the angle clockwise of `left`, or that angle plus a half turn.
 *
 * centre = middle + ½ cot(angle)·(Δn, −Δe), radius = chord / (2 |sin(angle)|)
 */
export function angleCircle(left: Place, right: Place, angle: number): Circle {
  let sine = Math.sin(angle);
  if (Math.abs(sine) < FLATTEST_ANGLE) sine = sine < 0 ? -FLATTEST_ANGLE : FLATTEST_ANGLE;
  const halfCotangent = Math.cos(angle) / sine / 2;
  const [east, north] = [right.easting - left.easting, right.northing - left.northing];
  return {
    easting: (left.easting + right.easting) / 2 + halfCotangent * north,
    northing: (left.northing + right.northing) / 2 - halfCotangent * east,
    radius: Math.hypot(east, north) / (2 * Math.abs(sine)),
  };
}

/** Where two circles meet: two places, or the one where they come nearest; none of circles about one centre. */
export function meetings(one: Circle, other: Circle): Place[] {
  const [east, north] = [other.easting - one.easting, other.northing - one.northing];
  const apart = Math.hypot(east, north);
  if (apart <= SAME_CIRCLE * Math.max(one.radius, other.radius)) return [];
  const along = (apart * apart + one.radius * one.radius - other.radius * other.radius) / (2 * apart);
  const square = one.radius * one.radius - along * along;
  const reach = square > 0 ? along : Math.sign(along) * one.radius;
  const foot = {
    easting: one.easting + (reach * east) / apart,
    northing: one.northing + (reach * north) / apart,
  };
  if (square <= 0) return [foot];
  const across = Math.sqrt(square) / apart;
  return [1, -1].map((side) => ({
    easting: foot.easting + side * across * north,
    northing: foot.northing - side * across * east,
  }));
}

/**
 * The other place where two circles through `shared` meet: its mirror image in the line of their centres. Null where
 * they are one circle, the danger circle.
 */
export function otherMeeting(one: Circle, other: Circle, shared: Place): Place | null {
  const [east, north] = [other.easting - one.easting, other.northing - one.northing];
  const square = east * east + north * north;
  if (Math.sqrt(square) <= SAME_CIRCLE * Math.max(one.radius, other.radius)) return null;
  const along = ((shared.easting - one.easting) * east + (shared.northing - one.northing) * north) / square;
  return {
    easting: 2 * (one.easting + along * east) - shared.easting,
    northing: 2 * (one.northing + along * north) - shared.northing,
  };
}

/** The circle through three places and more: exact for three, for more that of least algebraic misfit (Kåsa 1976). */
export function circleThrough(places: readonly Place[]): Circle | null {
  const mean = (of: (place: Place) => number) => places.reduce((sum, p) => sum + of(p), 0) / places.length;
  const middle = { easting: mean((p) => p.easting), northing: mean((p) => p.northing) };
  let [ee, en, nn, ez, nz, zz] = [0, 0, 0, 0, 0, 0];
  for (const { easting, northing } of places) {
    const [e, n] = [easting - middle.easting, northing - middle.northing];
    const z = e * e + n * n;
    ee += e * e;
    en += e * n;
    nn += n * n;
    ez += e * z;
    nz += n * z;
    zz += z;
  }
  const determinant = ee * nn - en * en;
  // On one line there is no circle.
  if (places.length < 3 || determinant <= 1e-8 * (ee + nn) ** 2) return null;
  const east = (ez * nn - nz * en) / (2 * determinant);
  const north = (nz * ee - ez * en) / (2 * determinant);
  return {
    easting: middle.easting + east,
    northing: middle.northing + north,
    radius: Math.sqrt(east * east + north * north + zz / places.length),
  };
}
