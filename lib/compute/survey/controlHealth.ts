import { Cofactors } from '@/lib/compute/adjustment/cofactors';
import { globalTest } from '@/lib/compute/adjustment/globalTest';
import { type Solution, solve } from '@/lib/compute/adjustment/solve';
import { suspiciousStart, withSuspicions } from '@/lib/compute/adjustment/suspicions';
import { chiSquareQuantile } from '@/lib/compute/statistics/distributions';
import { type Displacement, DisplacementTests, quadraticForm } from './displacement';
import type { Explanation } from './explain';
import type { Fault } from './fault';
import { axesMoved, isInPlace, type Place, placeOf, sees } from './inPlace';
import {
  type JointMark,
  type JointModel,
  jointModel,
  type Sighting,
  type WitnessLevel,
  type WitnessSetup,
} from './jointModel';

/**
 * Chance that a look at control in which nothing has moved finds something that has, over all marks and all times at
 * which each might have moved (Bonferroni). Small, since a look follows on many setups: common practice.
 */
export const FALSE_ALARM = 0.01;
/** The runner-up is to be ten times less likely before a mark is named: half the difference of T is its logarithm. */
export const NAMED_AT = 2 * Math.log(10);
/** One setup alone cannot tell a mark that moved from a target height or a name that was wrong there. */
export const SIGHTINGS_WANTED = 2;
/** East, north and up. */
const AXES = [0, 1, 2];

/** Faults that are found one after the other in one look; more is no single mark, but the whole. */
const MOST_FAULTS = 12;

/** What was seen of one mark in one setup, or along one level run. */
export interface MarkSighting {
  /** Id of the setup or of the level run. */
  source: string;
  observedAt: number;
  /** Its place from the other marks minus published, m; null where the others do not determine it. */
  difference: Place | null;
  sigma: Place | null;
  /** Its difference is more than chance makes of a mark in its place. */
  off: boolean;
}

/**
 * - `moved`: witnesses agree with its having moved, and nothing else explains them as well.
 * - `doubtful`: something shows it elsewhere and cannot be told from a misreading or from another mark.
 * - `unknown`: nothing tells where it stands, or not closely enough to show what a mark may miss by.
 */
export type Finding = 'steady' | 'moved' | 'doubtful' | 'unknown';

export interface MarkHealth {
  name: string;
  version: number;
  finding: Finding;
  sightings: MarkSighting[];
  /** Index of the first sighting of those that agree with the mark having moved; null where it has not. */
  movedSince: number | null;
  /** Index of the newest sighting that shows it elsewhere and that no later one answers; null where none does. */
  doubted: number | null;
  /** Index of the last sighting that could have seen it elsewhere and found it in its place, before it moved or is doubted. */
  lastInPlace: number | null;
  /** Where it stands minus where it was published: in all sightings, or in those since it moved. Null where unknown. */
  displacement: Place | null;
  /** Covariance of the displacement, 2 × 2 or 3 × 3 row by row, the published standard deviations in it once. */
  covariance: Float64Array | null;
  test: { statistic: number; critical: number; degreesOfFreedom: number } | null;
}

/** Kinds of faults that concern a setup as a whole: what such a setup says of its marks is not believed. */
const WHOLE_SETUP: ReadonlySet<Fault> = new Set([
  'distanceConstant',
  'distanceScale',
  'targetsSwapped',
  'singleFace',
  'wrongFoot',
]);

/** Whether a setup may be heard on its marks: not where a fault of the setup itself explains it best. */
export function isWitness(fit: { converged: boolean; explanations: readonly Explanation[] }): boolean {
  const [first] = fit.explanations;
  return fit.converged && !(first && WHOLE_SETUP.has(first.fault));
}

/**
 * Which marks have moved, by everything that many setups saw: every mark that may have moved before any of its
 * sightings, or have been misread in one of them, is one alternative to the joint adjustment in which nothing has moved.
 * The most telling alternative is taken into the model and the rest tested again (detection, identification and
 * adaptation; Teunissen, Testing Theory, ch. 4), until nothing is left that stands out.
 *
 * A mark is named where two witnesses at least, a setup among them, agree with its having moved, and nothing else
 * explains them as well. What stands out and names none leaves marks in doubt.
 *
 * Where more scatter is left than the stated accuracies allow, all covariances grow by σ₀².
 */
export function controlHealth(
  setups: readonly WitnessSetup[],
  levels: readonly WitnessLevel[] = [],
): MarkHealth[] {
  if (setups.length === 0) return [];
  const model = jointModel(setups, levels);
  const alternatives = model.marks.flatMap((known) => alternativesOf(known, model.sightings.get(known)!));
  // A misread sighting raises no alarm; each mark is tested once at least.
  const moves = alternatives.filter(({ since }) => since !== null).length;
  const tested = Math.max(1, model.marks.length, moves);
  const criticalOf = (axes: number) => chiSquareQuantile(1 - FALSE_ALARM / tested, axes);

  const residuals = new Map(setups.map(({ id, residual }) => [id, residual]));

  const found: Alternative[] = [];
  const doubts = new Set<Alternative>();
  let look = lookAt(model, found);
  while (found.length < MOST_FAULTS) {
    const { next, alike } = mostTelling(look, alternatives, found, criticalOf);
    for (const alternative of alike) doubts.add(alternative);
    if (!next) break;
    found.push(next);
    look = lookAt(model, found);
  }
  return model.marks.flatMap((known) => {
    const doubted = [...doubts].filter((alternative) => alternative.known === known);
    const own = model.sightings.get(known)!.flatMap(({ source }) => residuals.get(source) ?? []);
    return healthOf(known, look, found, doubted, smallest(own), criticalOf(known.axes)) ?? [];
  });
}

interface Alternative {
  known: JointMark;
  /** Sightings in which the mark stands elsewhere. */
  sightings: ReadonlySet<number>;
  /** Axes along which it does. */
  axes: readonly number[];
  /** From this sighting on to the last one it has moved; null for a fault of one sighting. */
  since: number | null;
}

function alternativesOf(known: JointMark, sightings: readonly Sighting[]): Alternative[] {
  const alternative = (indices: readonly number[], since: number | null): Alternative => {
    const axes = new Set(indices.flatMap((i) => sightings[i].rows.map(({ axis }) => axis)));
    return { known, sightings: new Set(indices), axes: [...axes].sort(), since };
  };
  const indices = [...sightings.keys()];
  const moved = indices
    .filter((since) => indices.length - since >= SIGHTINGS_WANTED)
    .map((since) => alternative(indices.slice(since), since))
    // By level runs alone nothing is known of its plan.
    .filter(({ axes }) => axes.length === known.axes);
  return [...moved, ...indices.map((i) => alternative([i], null))];
}

/** The joint adjustment with the faults found so far among its unknowns. */
interface Look {
  model: JointModel;
  solution: Solution;
  cofactors: Cofactors;
  /** σ₀² where the global test fails high, else 1. */
  variance: number;
  tests: Map<JointMark, DisplacementTests>;
}

function lookAt(model: JointModel, found: readonly Alternative[]): Look {
  let faults = 0;
  const entries = found.flatMap(({ known, sightings, axes }) => {
    const first = faults;
    faults += axes.length;
    return model.sightings.get(known)!.flatMap(({ rows }, i) =>
      sightings.has(i)
        ? rows.map(({ row, axis, coefficient }) => ({
            row,
            fault: first + axes.indexOf(axis),
            coefficient,
          }))
        : [],
    );
  });
  const suspicious = withSuspicions(model, faults, entries);
  const solution = solve(suspicious, suspiciousStart(model, new Float64Array(model.unknowns), faults));
  const cofactors = new Cofactors(solution);
  const tests = new Map(
    model.marks.map((known) => [
      known,
      new DisplacementTests(model, solution, cofactors, known, model.sightings.get(known)!),
    ]),
  );
  const test = globalTest(solution.weightedSquares, solution.degreesOfFreedom);
  return { model, solution, cofactors, variance: test.passed ? 1 : test.sigma0 ** 2, tests };
}

/** What has to be seen of a mark: what it may miss by in the strictest class of those who saw it. */
function smallest(residuals: readonly WitnessSetup['residual'][]): WitnessSetup['residual'] {
  return {
    horizontal: Math.min(...residuals.map(({ horizontal }) => horizontal)),
    vertical: Math.min(...residuals.map(({ vertical }) => vertical)),
  };
}

interface Telling {
  /** What explains most of what is left, where it can be told from the others; null where there is none. */
  next: Alternative | null;
  /** Alternatives of other marks that explain it as well; with the best one, where that is not told from them. */
  alike: Alternative[];
}

/** The alternative that explains most of what is left, where that is more than chance does. */
function mostTelling(
  look: Look,
  alternatives: readonly Alternative[],
  found: readonly Alternative[],
  criticalOf: (axes: number) => number,
): Telling {
  const taken = new Set(found);
  const candidates = alternatives.flatMap((alternative) => {
    if (taken.has(alternative)) return [];
    const { known, sightings, axes } = alternative;
    const displacement = look.tests.get(known)!.common(sightings, axes);
    if (!displacement) return [];
    const squares = look.solution.weightedSquares - displacement.statistic;
    const freedom = look.solution.degreesOfFreedom - axes.length;
    // What is judged is left out of what it is judged by.
    const rest = freedom > 0 ? globalTest(Math.max(0, squares), freedom) : null;
    const statistic = displacement.statistic / (rest && !rest.passed ? rest.sigma0 ** 2 : 1);
    return [{ alternative, statistic, beyond: statistic - criticalOf(axes.length) }];
  });
  candidates.sort((a, b) => b.beyond - a.beyond);
  const [best] = candidates;
  if (!best || best.beyond <= 0) return { next: null, alike: [] };
  const { known, since } = best.alternative;
  const close = candidates.filter(({ beyond }) => beyond > 0 && best.beyond - beyond < NAMED_AT);
  const others = close.flatMap(({ alternative }) => (alternative.known === known ? [] : alternative));
  if (since === null) return { next: best.alternative, alike: others };
  const rival = candidates.find(
    ({ alternative }) => alternative.known !== known || alternative.since === null,
  );
  if (!rival || best.beyond - rival.beyond >= NAMED_AT) return { next: best.alternative, alike: [] };
  return { next: null, alike: [best.alternative, ...others] };
}

function healthOf(
  known: JointMark,
  look: Look,
  found: readonly Alternative[],
  doubts: readonly Alternative[],
  residual: WitnessSetup['residual'],
  critical: number,
): MarkHealth | null {
  const indices = new Set(look.model.sightings.get(known)!.keys());
  if (indices.size === 0) return null;
  const { mark, axes } = known;
  const { name, version } = mark;
  const others = found.filter((alternative) => alternative.known !== known);
  const without = others.length === found.length ? look : lookAt(look.model, others);
  const moved = found.find((alternative) => alternative.known === known && alternative.since !== null);
  const whole = moved
    ? foundDisplacement(look, found, moved)
    : // Where all that saw it was left out as misread, that is what is known of it.
      (look.tests.get(known)!.common(indices, AXES.slice(0, axes)) ??
      without.tests.get(known)!.common(indices, AXES.slice(0, axes)));
  const sightings = differencesOf(known, without, look.variance, critical);
  const displacement = whole && placeOf(whole.estimate, 0, axes);
  const covariance = whole?.covariance.map((value) => value * look.variance) ?? null;
  const sigma = covariance && placeOf(covariance.map(Math.sqrt), 0, axes, axes + 1);
  const statistic = whole ? whole.statistic / look.variance : 0;

  const movedSince = moved?.since ?? null;
  const telling: Place = {
    easting: residual.horizontal,
    northing: residual.horizontal,
    elevation: axes === 3 ? residual.vertical : null,
  };
  const misread = found.filter((alternative) => alternative.known === known && alternative.since === null);
  const doubted = movedSince === null ? newestDoubt(sightings, [...misread, ...doubts], telling) : null;
  const beyond = doubted !== null || statistic > critical;
  let finding: Finding = 'steady';
  if (movedSince !== null) finding = 'moved';
  else if (beyond) finding = 'doubtful';
  else if (!sigma || !sees(sigma, telling)) finding = 'unknown';

  let wanted = telling;
  if (movedSince !== null && displacement && sigma) wanted = axesMoved(displacement, sigma);
  else if (doubted !== null) wanted = wantedAgainst(sightings[doubted], telling);
  const until = movedSince ?? doubted ?? sightings.length;
  const lastInPlace = sightings.slice(0, until).findLastIndex((sighting) => isInPlace(sighting, wanted));
  return {
    name,
    version,
    finding,
    sightings,
    movedSince,
    doubted,
    lastInPlace: lastInPlace < 0 ? null : lastInPlace,
    displacement,
    covariance,
    test: whole && { statistic, critical, degreesOfFreedom: axes },
  };
}

/** The newest sighting that shows a mark elsewhere, or may, where none that could have seen it found the mark in place since. */
function newestDoubt(
  sightings: readonly MarkSighting[],
  doubts: readonly Alternative[],
  telling: Place,
): number | null {
  const doubted = (index: number) => sightings[index].off || doubts.some((one) => one.sightings.has(index));
  const newest = sightings.findLastIndex((_, index) => doubted(index));
  if (newest < 0) return null;
  const wanted = wantedAgainst(sightings[newest], telling);
  return sightings.slice(newest + 1).some((later) => isInPlace(later, wanted)) ? null : newest;
}

/** What another sighting has to be able to see to answer this one. */
function wantedAgainst({ difference, sigma, off }: MarkSighting, telling: Place): Place {
  return off && difference && sigma ? axesMoved(difference, sigma) : telling;
}

/** What each sighting shows of a mark, in a look without its own faults; with the variance of the last one. */
function differencesOf(known: JointMark, look: Look, variance: number, critical: number): MarkSighting[] {
  const tests = look.tests.get(known)!;
  const sightings = look.model.sightings.get(known)!;
  const determined = [...sightings.keys()].filter(
    (i) => tests.common(new Set([i]), AXES.slice(0, known.axes)) !== null,
  );
  const each = determined.length === 0 ? null : tests.each(determined);
  const { axes } = known;
  const size = determined.length * axes;
  return sightings.map(({ source, observedAt }, i): MarkSighting => {
    const first = determined.indexOf(i) * axes;
    if (!each || first < 0) return { source, observedAt, difference: null, sigma: null, off: false };
    const covariance = Float64Array.from({ length: axes * axes }, (_, at) => {
      const [row, column] = [first + Math.floor(at / axes), first + (at % axes)];
      return each.covariance[row * size + column] * variance;
    });
    const estimate = each.estimate.slice(first, first + axes);
    return {
      source,
      observedAt,
      difference: placeOf(estimate, 0, axes),
      sigma: placeOf(covariance.map(Math.sqrt), 0, axes, axes + 1),
      off: quadraticForm(estimate, covariance) > critical,
    };
  });
}

/** A displacement that is among the unknowns of the last look. */
function foundDisplacement(
  { model, solution, cofactors }: Look,
  found: readonly Alternative[],
  moved: Alternative,
): Displacement {
  let first = model.shared;
  for (const alternative of found) {
    if (alternative === moved) break;
    first += alternative.axes.length;
  }
  const { axes } = moved.known;
  const estimate = solution.unknowns.slice(first, first + axes);
  const covariance = Float64Array.from({ length: axes * axes }, (_, i) =>
    cofactors.of(first + Math.floor(i / axes), first + (i % axes)),
  );
  return { estimate, covariance, statistic: quadraticForm(estimate, covariance) };
}
