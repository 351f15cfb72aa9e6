/** A place in plan, m. */
export interface PlanPlace {
  easting: number;
  northing: number;
}

export type LotPart =
  | 'whole lot'
  | 'middle'
  | `${'north' | 'south' | 'east' | 'west'} side`
  | `${'north' | 'south'}-${'east' | 'west'} corner`;

export interface Whereabouts {
  /** The part of the lot in which these places lie; null where they lie about. */
  part: LotPart | null;
  /** Which of the places lie elsewhere, by index; all of them where there is no part. */
  strays: number[];
}

/** A lot that reaches less far than this, m, either way has no sides to speak of. */
const LEAST_REACH = 10;

/** A side is the outer third of a lot: from here on, as a share of the way from its middle to its edge. */
const SIDE = 1 / 3;

/** So large a share of the places must lie in a part before it is named. */
const SHARE = 0.8;

/**
 * Where some places of a lot lie: in a corner or on a side where nearly all of them lie that far from the middle of
 * the lot's extent, all over it where they are the lot, or about.
 *
 * @param some indices into `lot`
 */
export function whereabouts(lot: readonly PlanPlace[], some: readonly number[]): Whereabouts {
  if (some.length === 0) return { part: null, strays: [] };
  if (some.length >= SHARE * lot.length && lot.length > 1) return { part: 'whole lot', strays: [] };
  const sideOf = { east: sides(lot, 'easting'), north: sides(lot, 'northing') };
  if (!sideOf.east && !sideOf.north) return { part: null, strays: [...some] };
  const at = some.map((index) => ({
    index,
    east: sideOf.east ? sideOf.east(lot[index]) : 0,
    north: sideOf.north ? sideOf.north(lot[index]) : 0,
  }));
  const parts: [LotPart, (place: { east: number; north: number }) => boolean][] = [
    ['north-east corner', ({ east, north }) => east > 0 && north > 0],
    ['north-west corner', ({ east, north }) => east < 0 && north > 0],
    ['south-east corner', ({ east, north }) => east > 0 && north < 0],
    ['south-west corner', ({ east, north }) => east < 0 && north < 0],
    ['north side', ({ north }) => north > 0],
    ['south side', ({ north }) => north < 0],
    ['east side', ({ east }) => east > 0],
    ['west side', ({ east }) => east < 0],
    ['middle', ({ east, north }) => east === 0 && north === 0],
  ];
  const fitting = parts
    .map(([part, isIn]) => ({ part, strays: at.filter((place) => !isIn(place)).map(({ index }) => index) }))
    .filter(({ strays }) => some.length - strays.length >= SHARE * some.length);
  const [first] = fitting;
  if (!first) return { part: null, strays: [...some] };
  // A corner lies on two sides and says more than either; of two sides the fuller, and neither where they are equal.
  if (first.part.endsWith('corner')) return first;
  const [fullest, second] = fitting.sort((a, b) => a.strays.length - b.strays.length);
  const undecided = second?.strays.length === fullest.strays.length;
  return undecided ? { part: null, strays: [...some] } : fullest;
}

/** On which side of the middle of a lot a place lies along an axis: −1, 0 near the middle, 1; null without a reach. */
function sides(
  lot: readonly PlanPlace[],
  axis: 'easting' | 'northing',
): ((place: PlanPlace) => number) | null {
  let [least, most] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (const place of lot) {
    least = Math.min(least, place[axis]);
    most = Math.max(most, place[axis]);
  }
  const reach = most - least;
  if (reach < LEAST_REACH) return null;
  return (place) => {
    const share = (place[axis] - (least + most) / 2) / (reach / 2);
    return Math.abs(share) < SIDE ? 0 : Math.sign(share);
  };
}
