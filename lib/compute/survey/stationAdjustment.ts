import { SingularError } from '@/lib/compute/adjustment/model';
import { type Solution, solve } from '@/lib/compute/adjustment/solve';
import { dangerCircle, isNear } from './dangerCircle';
import { type Erection, type Means, meanFaces, type Reading, type ReadingKind } from './faces';
import type { InstrumentAccuracy } from './instrument';
import type { ControlMark, Shot } from './shots';
import { sightsOf } from './sights';
import { ON_MARK } from './startCandidates';
import { occupiedStart, type StartValues, startValues } from './startValues';
import { type OccupiedAxis, type StationModel, stationModel } from './stationModel';
import type { Surroundings } from './surroundings';

/** The mark that an instrument was set up over. */
export interface Occupied {
  mark: ControlMark;
  /** Tilting axis above the mark, m. */
  instrumentHeight: number;
}

export interface StationInput {
  /** Orientation shots only, to marks of `control`. */
  shots: readonly Shot[];
  control: ReadonlyMap<string, ControlMark>;
  accuracy: InstrumentAccuracy;
  surroundings: Surroundings;
  /** Atmospheric correction wanted; null where the atmosphere is unknown. */
  ppm: number | null;
  /** Of a setup by backsights; a free station has none. */
  occupied?: Occupied | null;
}

export interface AdjustedStation {
  input: StationInput;
  means: Means;
  erections: readonly Erection[];
  readings: readonly Reading[];
  /** Marks to which a distance was read that could not be brought to the horizontal. */
  unusedDistances: string[];
  model: StationModel;
  solution: Solution;
  /** Solutions from other start values, which may be the same again. */
  others: readonly Solved[];
  /** A free station without any distance. */
  angleOnly: boolean;
}

interface Solved {
  model: StationModel;
  solution: Solution;
}

/** Why a setup cannot be computed at all. */
export class StationError extends Error {
  constructor(
    readonly code:
      | 'too_few_sights'
      | 'zenith_wanted'
      | 'not_determined'
      | 'danger_circle'
      | 'marks_at_station',
    /** Marks that it concerns. */
    readonly marks: readonly string[] = [],
  ) {
    super(code);
    this.name = 'StationError';
  }
}

/** Gross errors make the way long: it shortens by a part of the miss with every step. */
const MAX_ITERATIONS = 200;

/**
 * The adjustment of a station, free or over a known mark, from shots to the solution.
 *
 * @param maxIterations fewer where only a solution near by is of interest
 * @throws StationError where the shots do not determine a station
 */
export function adjustStation(input: StationInput, maxIterations = MAX_ITERATIONS): AdjustedStation {
  const { control, surroundings, ppm } = input;
  const means = meanFaces(input.shots, input.accuracy, ppm);
  const { erections } = means;
  const occupied = input.occupied ? occupiedAxis(input.occupied, input.accuracy) : null;
  if (occupied) refuseAtStation(occupied, erections, control);
  const readings = reducible(means.readings, erections, control, occupied);
  const sights = sightsOf(erections, readings, control, surroundings);
  const starts = occupied
    ? [occupiedStart(occupied, sights, surroundings)]
    : startValues(sights, surroundings);
  const angleOnly = !occupied && readings.every(({ kind }) => kind !== 'distance');
  const marks = marksOfKind('direction', readings, erections, control);
  if (starts.length === 0) {
    if (readings.length < means.readings.length) throw new StationError('zenith_wanted');
    if (angleOnly && marks.length > 2) throw new StationError('danger_circle', names(marks));
    throw new StationError('too_few_sights');
  }
  const solutions = starts.map((start) => {
    const model = stationModel({
      ...input,
      erections,
      readings,
      start,
      occupied,
      atmosphereKnown: ppm !== null,
    });
    return { model, solution: orUndetermined(() => solve(model, model.start, { maxIterations })) };
  });
  const solved = solutions.filter((one): one is Solved => one.solution !== null);
  const lost = angleOnly ? starts.some((start) => nearCircle(marks, start)) : false;
  if (solved.length === 0 || (lost && !solved.some(({ solution }) => solution.converged)))
    throw lost ? new StationError('danger_circle', names(marks)) : new StationError('not_determined');
  const [best, ...others] = solved.sort((a, b) => rank(a.solution) - rank(b.solution));
  const unused = means.readings.filter((reading) => !readings.includes(reading));
  return {
    ...best,
    input,
    means,
    erections,
    readings,
    unusedDistances: [...new Set(unused.map(({ erection }) => erections[erection].target))],
    others,
    angleOnly,
  };
}

/** @throws StationError where backsights are published where the instrument stands: no direction leads to them */
function refuseAtStation(
  { easting, northing }: OccupiedAxis,
  erections: readonly Erection[],
  control: ReadonlyMap<string, ControlMark>,
): void {
  const at = new Set(
    erections.flatMap(({ target }) => {
      const mark = control.get(target)!;
      return Math.hypot(mark.easting - easting, mark.northing - northing) < ON_MARK ? target : [];
    }),
  );
  if (at.size > 0) throw new StationError('marks_at_station', [...at]);
}

/** Solutions by vᵀPv; one that did not converge stands behind all that did. */
function rank({ converged, weightedSquares }: Solution): number {
  return converged ? weightedSquares : Number.MAX_VALUE;
}

function nearCircle(marks: readonly ControlMark[], station: StartValues): boolean {
  const danger = dangerCircle(marks, station);
  return danger !== null && isNear(danger);
}

/** The marks to which readings of a kind were taken. */
export function marksOfKind(
  kind: ReadingKind,
  readings: readonly Reading[],
  erections: readonly Erection[],
  control: ReadonlyMap<string, ControlMark>,
): ControlMark[] {
  const own = readings.filter((reading) => reading.kind === kind);
  return [...new Set(own.map(({ erection }) => erections[erection].target))].map(
    (name) => control.get(name)!,
  );
}

function names(marks: readonly ControlMark[]): string[] {
  return marks.map(({ name }) => name);
}

/** The axis over a mark: its coordinates, the instrument's centring and, as a measured height has, its height's σ. */
export function occupiedAxis(
  { mark, instrumentHeight }: Occupied,
  accuracy: InstrumentAccuracy,
): OccupiedAxis {
  return {
    easting: mark.easting,
    northing: mark.northing,
    axis: mark.elevation === null ? null : mark.elevation + instrumentHeight,
    horizontalSigma: Math.hypot(mark.horizontalSigma, accuracy.instrumentCentring),
    verticalSigma: Math.hypot(mark.verticalSigma, accuracy.targetHeight),
  };
}

/**
 * Leaves out slope distances that cannot be brought to the horizontal: those without a zenith angle, unless both ends
 * have a height, the mark's published and the instrument's from zenith angles to other marks or from its own mark.
 */
function reducible(
  readings: readonly Reading[],
  erections: readonly Erection[],
  control: ReadonlyMap<string, ControlMark>,
  occupied: OccupiedAxis | null,
): Reading[] {
  const hasElevation = (erection: number) => control.get(erections[erection].target)!.elevation !== null;
  const zeniths = new Set(readings.flatMap(({ kind, erection }) => (kind === 'zenith' ? erection : [])));
  const axisKnown = (occupied?.axis ?? null) !== null || [...zeniths].some(hasElevation);
  return readings.filter(
    ({ kind, erection }) =>
      kind !== 'distance' || zeniths.has(erection) || (axisKnown && hasElevation(erection)),
  );
}

function orUndetermined<T>(attempt: () => T): T | null {
  try {
    return attempt();
  } catch (error) {
    if (error instanceof SingularError) return null;
    throw error;
  }
}
