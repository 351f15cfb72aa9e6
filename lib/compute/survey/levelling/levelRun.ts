import { ROUNDING } from '@/lib/compute/grade/acceptance';
import { ASSUMED_SIGHT } from './accuracy';
import { type LevelSight, type PageCheck, pageCheck, stationsOf } from './book';
import { allowedMisclosure, type LevelLimit } from './limit';

/** A mark with a published elevation, m. */
export interface KnownHeight {
  name: string;
  elevation: number;
  sigma: number;
}

export interface LevelRunInput {
  /** A book without faults. */
  sights: readonly LevelSight[];
  start: KnownHeight;
  /** What it closes on; the start itself for a loop, null for a run that is left open. */
  end: KnownHeight | null;
  /** One run, m per √m. */
  sigma: number;
  /** What the line of sight rises per metre, and what is unknown of that, rad; taken off the readings. */
  collimation: number;
  collimationSigma: number;
  /** What curvature and refraction add to a reading, per m² of distance. */
  curvature: number;
  limit: LevelLimit;
}

export interface LevelLine {
  point: string;
  kind: 'start' | 'turning' | 'intermediate' | 'end';
  rise: number | null;
  fall: number | null;
  /** Height of collimation of the standing that begins here. */
  heightOfCollimation: number | null;
  /** As the book reduces it: readings alone, from the start's published elevation. */
  bookElevation: number;
  /** Of collimation, curvature and refraction, summed up from the start. */
  reduction: number;
  /** Share of the misclosure. */
  adjustment: number;
  /** bookElevation + reduction + adjustment. */
  elevation: number;
  standardDeviation: number;
  /** Way along the sights from the start; null where none was measured. */
  distance: number | null;
}

export interface Closure {
  kind: 'loop' | 'marks' | 'open';
  /** End minus start, as levelled and reduced, and as published (null for an open run). */
  levelled: number;
  published: number | null;
  /** Levelled minus published. */
  misclosure: number | null;
  allowed: number;
  /** Of the levelled difference alone. */
  levellingDeviation: number;
  /** Of the misclosure: that of the levelling and of both marks. */
  standardDeviation: number;
  /** The misclosure is more than allowed: nothing was distributed. */
  exceeds: boolean;
}

export interface SightBalance {
  standings: number;
  measured: boolean;
  /** All backsights and foresights, m; 30 m each where none was measured. */
  length: number;
  backsights: number | null;
  foresights: number | null;
  /** The largest sum of backsights minus foresights at any turning point, by size. */
  largestImbalance: number | null;
  /** What collimation, and curvature and refraction, made of the levelled difference; taken off. */
  collimationEffect: number;
  curvatureEffect: number;
}

export interface LevelRun {
  lines: LevelLine[];
  page: PageCheck;
  closure: Closure;
  balance: SightBalance;
}

/** What grows along a run. */
interface Way {
  /** Length of the sights so far. */
  path: number;
  /** Σd and Σd² of backsights minus foresights. */
  arm: number;
  armSquared: number;
}

/**
 * A level run in the manner of the field book: heights of collimation and rises and falls, collimation, curvature and
 * refraction taken off by the sights' lengths, the misclosure against its limit and, where it is within, distributed
 * along the way of the sights.
 *
 * A reading at distance d has the variance σ²d, so that the share of the way is the share of the variance: to
 * distribute by length is the least-squares solution of a single run between two marks (Ghilani, Adjustment
 * Computations, ch. 12), and what is left of the variance at way p of L is σ²p(L − p)/L. Within a standing the height
 * of collimation takes the share at its backsight, the same from either end of the run. The collimation's own error
 * is one for all sights. Where no distance was measured every sight counts the same.
 */
export function levelRun(input: LevelRunInput): LevelRun {
  const { sights, start, end, limit } = input;
  const measured = sights[0].backsightDistance !== null;
  const { lines: drafts, total, hubs } = walk(sights, start.elevation, measured);
  const reductionAt = ({ arm, armSquared }: Way) =>
    measured ? -(input.collimation * arm + input.curvature * armSquared) : 0;

  const first = drafts[0];
  const last = drafts[drafts.length - 1];
  const levelled = last.bookElevation - first.bookElevation + reductionAt(last.way);
  const kind = end === null ? 'open' : end.name === start.name ? 'loop' : 'marks';
  const published = end === null ? null : end.elevation - start.elevation;
  const misclosure = published === null ? null : levelled - published;
  const allowed = allowedMisclosure(limit, total.path, hubs);
  const exceeds = misclosure !== null && Math.abs(misclosure) > allowed + ROUNDING;
  const distributed = misclosure === null || exceeds ? 0 : misclosure;
  const closed = misclosure !== null && !exceeds;
  const variance = (draft: Draft) => lineVariance(draft, input, kind, closed, measured, total);

  const random = input.sigma ** 2 * total.path + (measured ? (input.collimationSigma * total.arm) ** 2 : 0);
  const ends = kind === 'marks' && end ? start.sigma ** 2 + end.sigma ** 2 : 0;
  return {
    lines: drafts.map((draft, i) => {
      const reduction = reductionAt(draft.way);
      const adjustment = distributed === 0 ? 0 : -distributed * (draft.share.path / total.path);
      return {
        point: draft.point,
        kind: i === 0 ? 'start' : i === drafts.length - 1 ? 'end' : draft.kind,
        rise: draft.rise !== null && draft.rise > 0 ? draft.rise : null,
        fall: draft.rise !== null && draft.rise <= 0 ? Math.abs(draft.rise) : null,
        heightOfCollimation: draft.heightOfCollimation,
        bookElevation: draft.bookElevation,
        reduction,
        adjustment,
        elevation: draft.bookElevation + reduction + adjustment,
        standardDeviation: Math.sqrt(variance(draft)),
        distance: measured ? draft.share.path : null,
      };
    }),
    page: pageCheck(sights, first.bookElevation, last.bookElevation),
    closure: {
      kind,
      levelled,
      published,
      misclosure,
      allowed,
      levellingDeviation: Math.sqrt(random),
      standardDeviation: Math.sqrt(random + ends),
      exceeds,
    },
    balance: {
      standings: hubs,
      measured,
      length: total.path,
      backsights: measured ? (total.path + total.arm) / 2 : null,
      foresights: measured ? (total.path - total.arm) / 2 : null,
      largestImbalance: measured ? largestArm(drafts) : null,
      collimationEffect: measured ? input.collimation * total.arm : 0,
      curvatureEffect: measured ? input.curvature * total.armSquared : 0,
    },
  };
}

interface Draft {
  point: string;
  kind: 'turning' | 'intermediate';
  rise: number | null;
  heightOfCollimation: number | null;
  bookElevation: number;
  /** Sums that the elevation of the point hangs on. */
  way: Way;
  /** Place along the run that its share of the misclosure is taken at. */
  share: Way;
  /** Of the single reading to an intermediate point; 0 elsewhere. */
  branch: number;
}

function walk(sights: readonly LevelSight[], elevation: number, measured: boolean) {
  const lengthOf = (distance: number | null) => (measured ? (distance ?? 0) : ASSUMED_SIGHT);
  const at = { path: 0, arm: 0, armSquared: 0 };
  const lines: Draft[] = [
    {
      point: sights[0].point,
      kind: 'turning',
      rise: null,
      heightOfCollimation: null,
      bookElevation: elevation,
      way: { ...at },
      share: { ...at },
      branch: 0,
    },
  ];
  const stations = stationsOf(sights);
  for (const { back, between, fore } of stations) {
    const backLength = lengthOf(sights[back].backsightDistance);
    const foreLength = lengthOf(sights[fore].foresightDistance);
    const behind = lines[lines.length - 1];
    const collimation = behind.bookElevation + (sights[back].backsight ?? 0);
    behind.heightOfCollimation = collimation;
    let before = sights[back].backsight ?? 0;
    at.path += backLength;
    at.arm += backLength;
    at.armSquared += backLength ** 2;
    const hub = { ...at };
    for (const line of [...between, fore]) {
      const isFore = line === fore;
      const { point, intermediate, intermediateDistance, foresight } = sights[line];
      const reading = (isFore ? foresight : intermediate) ?? 0;
      // An intermediate sight that nobody measured counts as long as the mean of its standing's two.
      const length = isFore
        ? foreLength
        : measured
          ? (intermediateDistance ?? (backLength + foreLength) / 2)
          : ASSUMED_SIGHT;
      const way = {
        path: hub.path + length,
        arm: hub.arm - length,
        armSquared: hub.armSquared - length ** 2,
      };
      if (isFore) Object.assign(at, way);
      lines.push({
        point,
        kind: isFore ? 'turning' : 'intermediate',
        rise: before - reading,
        heightOfCollimation: null,
        bookElevation: collimation - reading,
        way,
        share: isFore ? way : hub,
        branch: isFore ? 0 : length,
      });
      before = reading;
    }
  }
  return { lines, total: at, hubs: stations.length };
}

/** Variance of an elevation, m²: of the marks that hold the run, its readings, and the collimation. */
function lineVariance(
  { way, share, branch }: Draft,
  { start, end, sigma, collimationSigma }: LevelRunInput,
  kind: Closure['kind'],
  closed: boolean,
  measured: boolean,
  total: Way,
): number {
  const t = closed ? share.path / total.path : 0;
  const held =
    kind === 'marks' && closed && end
      ? (1 - t) ** 2 * start.sigma ** 2 + t ** 2 * end.sigma ** 2
      : start.sigma ** 2;
  const along = share.path * (1 - t) + branch;
  const arm = measured ? way.arm - t * total.arm : 0;
  return held + sigma ** 2 * along + (collimationSigma * arm) ** 2;
}

function largestArm(drafts: readonly Draft[]): number {
  let largest = 0;
  for (const { kind, way } of drafts) {
    if (kind === 'turning' && Math.abs(way.arm) > Math.abs(largest)) largest = way.arm;
  }
  return largest;
}
