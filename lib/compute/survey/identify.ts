import { wrapTurn } from '@/lib/compute/units/angles';
import { ControlIndex, type SamePlace } from './identifyControl';
import { type Weighed, weigh } from './identifyEvidence';
import { misfit, type Pose, placeAt, planVariance, roughPose, STRAY } from './identifyPose';
import {
  type Place,
  placesOf,
  type Reflector,
  reflectorsOf,
  type Sighting,
  type UnnamedShot,
} from './identifyReflectors';
import { ON_MARK, type Search, search } from './identifySearch';
import { type DecidingShot, decidingShot } from './identifySettling';
import type { ControlMark, Shot } from './shots';

/** Which mark each reflector stands on, and where the instrument then stands. */
export interface Assignment {
  station: { easting: number; northing: number; axis: number | null; orientation: number };
  /** Name of the mark of each reflector, in the order of the reflectors; null for a stray. */
  marks: (string | null)[];
  matched: number;
  weightedSquares: number;
  /** ln of how much better it explains the shots than chance does. */
  evidence: number;
}

/** A reflector that stands on no control point, and the point that it misses least. */
export interface Stray {
  shots: string[];
  nearest: { target: string; horizontal: number; vertical: number | null } | null;
}

export interface Identification {
  reflectors: Pick<Reflector, 'shots'>[];
  /** More than one assignment could be true, or chance could have made it, or not all could be looked at. */
  ambiguous: boolean;
  /** ln of the odds against the second-best assignment, or against chance where there is no other. */
  margin: number;
  best: Assignment;
  /** Other assignments that could be true, the likeliest first. */
  rivals: Assignment[];
  /** There are more of them than are listed. */
  more: boolean;
  strays: Stray[];
  /** Marks of the best assignment that stand for others at the same place. */
  samePlace: SamePlace[];
  /** The one shot by name that would tell the assignments apart. */
  deciding: DecidingShot | null;
  /** Marks whose later shots by name fit another assignment and not the best one. */
  contradictedBy: string[];
}

/** Why no assignment was found. */
export class IdentificationError extends Error {
  constructor(
    readonly code: 'reading_lacks' | 'too_few_reflectors' | 'too_little_control' | 'no_fit' | 'too_many_fits',
    readonly facts: { shots: string[]; reflectors: number; points: number; most: number },
  ) {
    super(code);
    this.name = 'IdentificationError';
  }
}

/** Odds of 1000 to 1: less is not sure. */
export const SURE = Math.log(1000);
/** One reflector in so many may be a stray without anybody having to wonder. */
export const STRAYS_ONE_IN = 4;
export const FEWEST = 3;
const MOST_LISTED = 5;

/**
 * Finds the control points behind unnamed shots by rigid geometry in three dimensions. The frame of the instrument is
 * levelled: east, north, height and orientation are unknown.
 *
 * An assignment must bring three reflectors onto marks and may leave a quarter of them stray; only where none does, up
 * to half of them. Whatever else does so from another stand makes it ambiguous, though it explain a reflector less:
 * regular layouts repeat themselves, and where a point is missing from the list the wrong assignment fits best. So do
 * odds against the second-best, or against chance, below 1000 to 1. Shots to named marks decide between them.
 *
 * @param named shots of the same setup to marks by name, which took no part in the search
 * @throws IdentificationError where nothing fits
 */
export function identify(
  index: ControlIndex,
  input: Sighting & {
    shots: readonly UnnamedShot[];
    named?: readonly Shot[];
    control: ReadonlyMap<string, ControlMark>;
  },
): Identification {
  const { reflectors, incomplete } = reflectorsOf(input.shots, input);
  const facts = { shots: incomplete, reflectors: reflectors.length, points: index.marks.length, most: 0 };
  if (incomplete.length > 0) throw new IdentificationError('reading_lacks', facts);
  if (reflectors.length < FEWEST) throw new IdentificationError('too_few_reflectors', facts);
  if (index.marks.length < FEWEST) throw new IdentificationError('too_little_control', facts);
  const { found, most, cut } = searched(index, reflectors);
  if (found.length === 0) {
    throw new IdentificationError(cut ? 'too_many_fits' : 'no_fit', { ...facts, most });
  }
  const weighed = decided(
    index,
    found.map((one) => weigh(index, reflectors, one.marks, one.pose)),
    input,
  );
  const distinct = withoutParts(index, reflectors, weighed.sort(byEvidence));
  const [best] = distinct;
  const elsewhere = distinct.filter((other) => !isSameStand(index, reflectors, best, other));
  const others = [...distinct.slice(1), ...otherMarks(index, reflectors, best)].sort(byEvidence);
  const margin = best.evidence - Math.max(0, others[0]?.evidence ?? 0);
  const open = others.filter((other) => best.evidence - other.evidence < SURE || elsewhere.includes(other));
  const rivals = open.slice(0, MOST_LISTED);
  const ambiguous = margin < SURE || open.length > 0 || cut;
  const used = new Set(best.marks);
  return {
    reflectors: reflectors.map(({ shots }) => ({ shots })),
    ambiguous,
    margin,
    best: assignment(index, best),
    rivals: rivals.map((rival) => assignment(index, rival)),
    more: cut || open.length > rivals.length,
    strays: reflectors.flatMap((reflector, k) =>
      best.marks[k] === STRAY ? { shots: reflector.shots, nearest: nearestMark(index, reflector, best) } : [],
    ),
    samePlace: index.samePlace.filter(({ target }) =>
      [...used].some((mark) => mark !== STRAY && index.marks[mark].name === target),
    ),
    contradictedBy: [],
    deciding: decidingShot(
      index,
      reflectors,
      best.pose,
      rivals.map(({ pose }) => pose),
      input.surroundings,
    ),
  };
}

/** With up to a quarter of the reflectors stray or, where nothing fits so, with fewer than half of them. */
function searched(index: ControlIndex, reflectors: readonly Reflector[]): Search {
  const count = reflectors.length;
  const [most, fewest] = [count - Math.floor(count / STRAYS_ONE_IN), Math.floor(count / 2) + 1];
  const usual = search(index, reflectors, Math.max(FEWEST, most));
  if (usual.found.length > 0 || usual.cut || fewest >= most || most <= FEWEST) return usual;
  return search(index, reflectors, Math.max(FEWEST, fewest));
}

function byEvidence(a: Weighed, b: Weighed): number {
  return b.evidence - a.evidence;
}

function assignment(
  index: ControlIndex,
  { pose, marks, matched, weightedSquares, evidence }: Weighed,
): Assignment {
  const { east, north, up, orientation } = pose;
  return {
    station: {
      easting: east,
      northing: north,
      axis: Number.isNaN(up) ? null : up,
      orientation: wrapTurn(orientation),
    },
    marks: Array.from(marks, (mark) => (mark === STRAY ? null : index.marks[mark].name)),
    matched,
    weightedSquares,
    evidence,
  };
}

/** Of assignments, those that named shots agree with; all of them where no one does, for then the name may be wrong. */
function decided(
  index: ControlIndex,
  found: Weighed[],
  { named = [], control, ...sighting }: Parameters<typeof identify>[1],
): Weighed[] {
  const seen = [...new Set(named.map(({ target }) => target))].flatMap((target) => {
    const mark = control.get(target);
    const shots = named.filter((shot) => shot.target === target);
    return mark ? placesOf(shots, sighting).map((place) => ({ place, mark })) : [];
  });
  if (seen.length === 0) return found;
  const agreeing = found.filter((one) => seen.every(({ place, mark }) => agrees(index, one, place, mark)));
  return agreeing.length > 0 ? agreeing : found;
}

function agrees(
  index: ControlIndex,
  { marks, reflectors, pose }: Weighed,
  place: Place,
  mark: ControlMark,
): boolean {
  const rough = roughPose(index, reflectors, marks);
  const alone = new ControlIndex([{ ...mark, status: 'trusted' }]);
  return rough !== null && misfit(alone, 0, place, { pose, spread: rough.spread }) <= ON_MARK;
}

/** Leaves out assignments that say the same as a likelier one of fewer or more reflectors from the same stand. */
function withoutParts(
  index: ControlIndex,
  reflectors: readonly Reflector[],
  sorted: readonly Weighed[],
): Weighed[] {
  const kept: Weighed[] = [];
  for (const one of sorted) {
    const known = kept.some((other) => {
      const contradicts = one.marks.some((mark, k) => {
        const theirs = other.marks[k];
        return mark !== STRAY && theirs !== STRAY && mark !== theirs;
      });
      return !contradicts && isSameStand(index, reflectors, one, other);
    });
    if (!known) kept.push(one);
  }
  return kept;
}

/** Whether two poses have every reflector at the same place, as far as its shots can tell. */
function isSameStand(
  index: ControlIndex,
  reflectors: readonly Reflector[],
  one: Weighed,
  other: Weighed,
): boolean {
  const rough = roughPose(index, reflectors, other.marks);
  return (
    rough !== null &&
    reflectors.every((place) => {
      const [a, b] = [placeAt(one.pose, place), placeAt(other.pose, place)];
      const plan = place.along ** 2 + place.across ** 2 + planVariance(rough.spread, b);
      return (a.east - b.east) ** 2 + (a.north - b.north) ** 2 <= ON_MARK * plan;
    })
  );
}

/** The best assignment with one reflector on another mark that it could stand on as well. */
function otherMarks(index: ControlIndex, reflectors: readonly Reflector[], best: Weighed): Weighed[] {
  const rough = roughPose(index, reflectors, best.marks);
  if (rough === null) return [];
  return reflectors.flatMap((place, k) => {
    if (best.marks[k] === STRAY) return [];
    const others: Weighed[] = [];
    const at = placeAt(best.pose, place);
    const plan = place.along ** 2 + place.across ** 2 + index.worstHorizontal ** 2;
    const reach = Math.sqrt(ON_MARK * (plan + planVariance(rough.spread, at)));
    index.near(at.east, at.north, reach, (mark) => {
      if (best.marks.includes(mark)) return;
      if (!(misfit(index, mark, place, { pose: best.pose, spread: rough.spread }) <= ON_MARK)) return;
      const marks = best.marks.slice();
      marks[k] = mark;
      others.push(weigh(index, reflectors, marks, best.pose));
    });
    return others;
  });
}

/** The mark that a stray misses least, among those within its own distance. */
function nearestMark(index: ControlIndex, place: Reflector, { pose }: { pose: Pose }): Stray['nearest'] {
  const at = placeAt(pose, place);
  const reach = Math.hypot(place.east, place.north);
  let nearest: (Stray['nearest'] & { apart: number }) | null = null;
  index.near(at.east, at.north, reach, (mark) => {
    const horizontal = Math.hypot(index.east[mark] - at.east, index.north[mark] - at.north);
    const rise = Math.abs(index.up[mark] - at.up);
    const vertical = Number.isNaN(rise) ? null : rise;
    const apart = Math.hypot(horizontal, vertical ?? 0);
    if (apart < (nearest?.apart ?? reach)) {
      nearest = { target: index.marks[mark].name, horizontal, vertical, apart };
    }
  });
  if (nearest === null) return null;
  const { target, horizontal, vertical } = nearest as NonNullable<Stray['nearest']>;
  return { target, horizontal, vertical };
}
