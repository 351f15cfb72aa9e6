import { chiSquareQuantile } from '@/lib/compute/statistics/distributions';
import type { ControlIndex } from './identifyControl';
import { misfit, type Pose, placeAt, planVariance, roughPose, type SpreadPose, STRAY } from './identifyPose';
import type { Place } from './identifyReflectors';

/** A place farther from its mark than this (χ² of three) is not on it: five good places of a million are lost. */
export const ON_MARK = chiSquareQuantile(1 - 5e-6, 3);
/** The same of one axis alone. */
export const REACH = Math.sqrt(ON_MARK);
/** Of more reflectors, pairs are tried of so many: each still finds its mark in the end. */
const MOST_PAIRED = 24;
/** So many assignments that fit alike are enough to know that the layout repeats itself. */
const MOST_KEPT = 200;
/** Pairs of marks looked at closely before the search gives up, for one upload must not keep the others waiting. */
const MOST_LOOKS = 400_000;
/** The same of marks compared with a place: where they crowd, one look may compare thousands. */
const MOST_COMPARED = 60_000_000;
const MOST_ROUNDS = 8;
/** Distances under so small a part of the longest cost more by what they leave open than they save. */
const SHORT = 10;
/** A distance under so many of its standard deviations gives no direction. */
const STUBBY = 20;

/** Which mark each reflector stands on, STRAY for none, and the pose that follows. */
export interface Found {
  marks: Int32Array;
  pose: Pose;
  matched: number;
}

export interface Search {
  found: Found[];
  /** The most reflectors that any pose brings onto marks, though they be too few. */
  most: number;
  /** It gave up on some: there may be more. */
  cut: boolean;
}

/**
 * Every consistent assignment of reflectors to marks. A pair of reflectors has a horizontal distance and a difference
 * of heights that no turn and no shift of a levelled instrument changes; each pair of marks with the same two fixes a
 * pose, in which the other reflectors are looked for. Pairs are chosen so that among any `least` reflectors on marks
 * there is one; of those choices, one whose distances few pairs of marks have.
 *
 * @param least reflectors that must stand on marks
 */
export function search(index: ControlIndex, places: readonly Place[], least: number): Search {
  const paired = pairedPlaces(places);
  const among = Math.max(3, Math.ceil((least * paired.length) / places.length));
  const kept = new Map<string, Found>();
  const tried = new Set<string>();
  let most = 0;
  let looks = 0;
  let compared = 0;
  let cut = false;
  for (const [i, j] of chosenPairs(paired, among)) {
    const look = looker(index, paired, i, j, among);
    const tryPair = (from: number, to: number) => {
      const hits = look.at(from, to);
      if (hits === null) return;
      const key = hits.join();
      if (tried.has(key)) return;
      tried.add(key);
      if (kept.size >= MOST_KEPT && hits.filter((mark) => mark !== STRAY).length <= most) {
        cut = true;
        return;
      }
      const found = settled(index, places, paired, hits);
      if (found === null) return;
      most = Math.max(most, found.matched);
      if (found.matched >= least) kept.set(found.marks.join(), found);
    };
    const left = MOST_COMPARED - compared;
    compared += look.pairs(left, (from, to) => {
      if (looks++ > MOST_LOOKS || look.compared() > left) return false;
      tryPair(from, to);
      return true;
    });
    compared += look.compared();
    if (looks > MOST_LOOKS || compared > MOST_COMPARED) {
      cut = true;
      break;
    }
  }
  return { found: [...kept.values()], most, cut };
}

/** Some of many reflectors, spread over the circle. */
function pairedPlaces(places: readonly Place[]): readonly Place[] {
  if (places.length <= MOST_PAIRED) return places;
  const around = [...places].sort((a, b) => Math.atan2(a.east, a.north) - Math.atan2(b.east, b.north));
  return Array.from({ length: MOST_PAIRED }, (_, i) => around[Math.floor((i * around.length) / MOST_PAIRED)]);
}

/**
 * Pairs of which any `least` reflectors hold one: the reflectors in `least` − 1 groups, and all pairs within each, so
 * that two of them share a group whatever they are. Groups are joined the cheapest first.
 */
function chosenPairs(places: readonly Place[], least: number): [number, number][] {
  const apart = (i: number, j: number) =>
    Math.hypot(places[i].east - places[j].east, places[i].north - places[j].north);
  const extent = places.reduce(
    (longest, _, i) => places.reduce((far, __, j) => Math.max(far, apart(i, j)), longest),
    0,
  );
  // A long distance has many pairs of marks near it; a short one says little of where the others are.
  const cost = (i: number, j: number) => {
    const length = apart(i, j);
    return length === 0 ? Number.POSITIVE_INFINITY : length * (1 + (extent / (SHORT * length)) ** 2);
  };
  let groups = places.map((_, i) => [i]);
  while (groups.length > least - 1) {
    let [cheapest, one, other] = [Number.POSITIVE_INFINITY, 0, 1];
    for (let a = 0; a < groups.length; a++) {
      for (let b = a + 1; b < groups.length; b++) {
        let sum = 0;
        for (const i of groups[a]) for (const j of groups[b]) sum += cost(i, j);
        if (sum < cheapest) [cheapest, one, other] = [sum, a, b];
      }
    }
    const joined = [...groups[one], ...groups[other]];
    groups = [...groups.filter((_, g) => g !== one && g !== other), joined];
  }
  return groups
    .flatMap((group) => group.flatMap((i, a) => group.slice(a + 1).map((j): [number, number] => [i, j])))
    .filter(([i, j]) => apart(i, j) > STUBBY * Math.sqrt(planWorst(places[i]) + planWorst(places[j])));
}

/** Looks, from a pair of marks that a pair of reflectors may stand on, for the marks of the other reflectors. */
function looker(index: ControlIndex, places: readonly Place[], i: number, j: number, least: number) {
  const [first, second] = [places[i], places[j]];
  const [de, dn] = [second.east - first.east, second.north - first.north];
  const length = Math.hypot(de, dn);
  const [ue, un] = [de / length, dn / length];
  const rise = second.up - first.up;
  const line = planSquare(first, ue, un) + planSquare(second, ue, un);
  const steep = first.vertical ** 2 + second.vertical ** 2;
  const worst = { plan: index.worstHorizontal ** 2, up: index.worstVertical ** 2 };
  const middle = {
    east: (first.east + second.east) / 2,
    north: (first.north + second.north) / 2,
    up: (first.up + second.up) / 2,
  };
  const broad = Math.max(planWorst(first), planWorst(second)) + worst.plan;
  const others = places.flatMap((place, k) => {
    if (k === i || k === j) return [];
    const [east, north] = [place.east - middle.east, place.north - middle.north];
    // The pair's own errors shift the place by half their sum and swing it by its lever.
    const swing = broad / 2 + ((east * east + north * north) * 2 * broad) / length ** 2;
    return {
      k,
      forward: east * ue + north * un,
      aside: north * ue - east * un,
      up: place.up - middle.up,
      reach: REACH * Math.sqrt(swing + planWorst(place) + worst.plan),
      rise: REACH * Math.sqrt(steep / 4 + worst.up / 2 + place.vertical ** 2 + worst.up),
    };
  });
  // Those whose place is known best come first: they refuse a wrong pair soonest.
  others.sort((a, b) => a.reach - b.reach);
  const hits = new Int32Array(places.length);
  let nearest = STRAY;
  let compared = 0;
  let [east, north, up, reach, tall, closest] = [0, 0, 0, 0, 0, 0];
  const compare = (mark: number) => {
    const [e, n] = [index.east[mark] - east, index.north[mark] - north];
    const square = (e * e + n * n) / (reach * reach);
    if (!(square < closest)) return;
    const height = (index.up[mark] - up) / tall;
    if (height > 1 || height < -1) return;
    closest = square;
    nearest = mark;
  };
  return {
    pairs(most: number, found: (from: number, to: number) => boolean): number {
      const tolerance = {
        distance: REACH * Math.sqrt(line + 2 * worst.plan),
        rise: REACH * Math.sqrt(steep + 2 * worst.up),
      };
      return index.pairs({ distance: length, rise }, tolerance, most, (from, to) => {
        const own = line + index.horizontal[from] ** 2 + index.horizontal[to] ** 2;
        const distance = Math.hypot(index.east[to] - index.east[from], index.north[to] - index.north[from]);
        if (Math.abs(distance - length) > REACH * Math.sqrt(own)) return true;
        const [up1, up2] = [index.up[from], index.up[to]];
        const upright = steep + index.vertical[from] ** 2 + index.vertical[to] ** 2;
        if (Math.abs(up2 - up1 - rise) > REACH * Math.sqrt(upright)) return true;
        return found(from, to);
      });
    },
    /** Marks that were compared with places. */
    compared: () => compared,
    /** Marks of all reflectors, or null where too few have one. */
    at(from: number, to: number): Int32Array | null {
      const [we, wn] = [index.east[to] - index.east[from], index.north[to] - index.north[from]];
      const distance = Math.hypot(we, wn);
      const [ae, an] = [we / distance, wn / distance];
      const [midEast, midNorth] = [
        (index.east[from] + index.east[to]) / 2,
        (index.north[from] + index.north[to]) / 2,
      ];
      const midUp = middleUp(index.up[from], index.up[to], rise);
      hits.fill(STRAY);
      hits[i] = from;
      hits[j] = to;
      let misses = 0;
      for (const other of others) {
        east = midEast + other.forward * ae - other.aside * an;
        north = midNorth + other.forward * an + other.aside * ae;
        up = midUp + other.up;
        reach = other.reach;
        tall = other.rise;
        closest = 1;
        nearest = STRAY;
        compared += index.near(east, north, reach, compare);
        hits[other.k] = nearest;
        if (nearest === STRAY && ++misses > places.length - least) return null;
      }
      return hits.slice();
    },
  };
}

/** Height in the middle of two marks, from one where the other has none. */
function middleUp(from: number, to: number, rise: number): number {
  if (Number.isNaN(from)) return to - rise / 2;
  return Number.isNaN(to) ? from + rise / 2 : (from + to) / 2;
}

/** Variance of a place towards a direction of its own frame. */
function planSquare({ direction, along, across }: Place, east: number, north: number): number {
  const [sine, cosine] = [Math.sin(direction), Math.cos(direction)];
  return ((east * sine + north * cosine) * along) ** 2 + ((east * cosine - north * sine) * across) ** 2;
}

function planWorst({ along, across }: Place): number {
  return Math.max(along, across) ** 2;
}

/**
 * The assignment that marks found at first lead to: the pose of those that there are, the marks nearest in it, and so
 * on until nothing changes. Null where fewer than three reflectors stay on marks.
 */
function settled(
  index: ControlIndex,
  places: readonly Place[],
  paired: readonly Place[],
  hits: Int32Array,
): Found | null {
  let marks: Int32Array = new Int32Array(places.length).fill(STRAY);
  paired.forEach((place, k) => {
    marks[paired === places ? k : places.indexOf(place)] = hits[k];
  });
  for (let round = 0; round < MOST_ROUNDS; round++) {
    const rough = roughPose(index, places, marks);
    if (rough === null) return null;
    const next = nearestMarks(index, places, rough);
    const matched = next.reduce((count, mark) => count + (mark === STRAY ? 0 : 1), 0);
    if (matched < 3) return null;
    if (next.every((mark, k) => mark === marks[k])) return { marks, pose: rough.pose, matched };
    marks = next;
  }
  return null;
}

/** For each place the mark that it fits best in a pose; of two places on one mark, the better one has it. */
function nearestMarks(index: ControlIndex, places: readonly Place[], rough: SpreadPose): Int32Array {
  const marks = new Int32Array(places.length).fill(STRAY);
  const squares = new Map<number, { square: number; k: number }>();
  places.forEach((place, k) => {
    const at = placeAt(rough.pose, place);
    let best = ON_MARK;
    const allowed = planWorst(place) + index.worstHorizontal ** 2 + planVariance(rough.spread, at);
    index.near(at.east, at.north, REACH * Math.sqrt(allowed), (mark) => {
      const square = misfit(index, mark, place, rough);
      if (!(square < best)) return;
      best = square;
      marks[k] = mark;
    });
    if (marks[k] === STRAY) return;
    const rival = squares.get(marks[k]);
    if (rival && rival.square <= best) marks[k] = STRAY;
    else {
      if (rival) marks[rival.k] = STRAY;
      squares.set(marks[k], { square: best, k });
    }
  });
  return marks;
}
