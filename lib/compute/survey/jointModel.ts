import type { AdjustmentModel } from '@/lib/compute/adjustment/model';
import { RowBuilder } from '@/lib/compute/adjustment/rows';
import type { ControlMark } from './shots';
import type { AdjustedStation } from './stationAdjustment';

/** One setup as a witness of the marks that it saw. */
export interface WitnessSetup {
  id: string;
  /** ms since 1970. */
  observedAt: number;
  adjusted: AdjustedStation;
  /** What a mark may miss by in the setup's tolerance class, m. */
  residual: { horizontal: number; vertical: number };
}

/** A height difference between two marks from another source, such as a level run; m. */
export interface WitnessLevel {
  id: string;
  from: Pick<ControlMark, 'name' | 'version'>;
  to: Pick<ControlMark, 'name' | 'version'>;
  /** Height of `to` minus height of `from`. */
  difference: number;
  sigma: number;
  observedAt: number;
}

/** A mark in one version of its published coordinates. */
export interface JointMark {
  mark: ControlMark;
  /** First of its unknowns: errors of easting, northing and, where it has one, elevation. */
  first: number;
  axes: 2 | 3;
}

/** A row that a displacement of a mark would enter. */
export interface TellingRow {
  row: number;
  axis: number;
  /** ∂f/∂∇ of a displacement along the axis. */
  coefficient: number;
}

/** What one setup, or one level run, says of one mark. */
export interface Sighting {
  /** Id of the setup or of the level run. */
  source: string;
  observedAt: number;
  rows: TellingRow[];
}

export interface JointModel extends AdjustmentModel {
  readonly marks: readonly JointMark[];
  /** Sightings of each mark in their order of time. */
  readonly sightings: ReadonlyMap<JointMark, readonly Sighting[]>;
}

/**
 * How far a mark moves within a setup, m: reflectors that are set up better than that, or several on one mark, share
 * its place.
 */
const STEADY = 1e-4;

/** A mark that was published anew is another mark: what was seen of the old coordinates says nothing of the new ones. */
function jointKey({ name, version }: Pick<ControlMark, 'name' | 'version'>): string {
  return `${name}\n${version}`;
}

/**
 * Many setups as one problem, linear about each setup's own solution. Shared unknowns: the error of each mark's
 * published coordinates, held once by their published standard deviations, however many setups saw it. A block for
 * each setup: all its own unknowns, its marks among them, each tied to the shared one by a row
 *
 *   place in this setup − published − error = 0 ± the reflector's centring and height,
 *
 * which is where a mark that has moved would show.
 */
export function jointModel(
  setups: readonly WitnessSetup[],
  levels: readonly WitnessLevel[] = [],
): JointModel {
  const marks = new Map<string, JointMark>();
  let shared = 0;
  for (const { adjusted } of setups) {
    for (const name of adjusted.model.marks) {
      const mark = adjusted.input.control.get(name)!;
      const key = jointKey(mark);
      if (marks.has(key)) continue;
      const axes = mark.elevation === null ? 2 : 3;
      marks.set(key, { mark, first: shared, axes });
      shared += axes;
    }
  }

  const rows = new RowBuilder();
  const coefficients: number[] = [];
  const misclosures: number[] = [];
  const add = (columns: number[], values: number[], misclosure: number, sigma: number) => {
    for (const value of values) coefficients.push(value);
    misclosures.push(misclosure);
    return rows.add(columns, sigma);
  };
  const sightings = new Map<JointMark, Sighting[]>([...marks.values()].map((known) => [known, []]));
  // The two sections of a run that meet in a mark are one witness of it.
  const see = (known: JointMark, source: string, observedAt: number, rowsOfMark: TellingRow[]) => {
    const own = sightings.get(known)!;
    const before = own.find((sighting) => sighting.source === source);
    if (before) before.rows.push(...rowsOfMark);
    else own.push({ source, observedAt, rows: rowsOfMark });
  };
  const blocks = new Int32Array(setups.length + 1);
  blocks[0] = shared;
  setups.forEach(({ id, observedAt, adjusted }, s) => {
    const { model, solution } = adjusted;
    const first = blocks[s];
    blocks[s + 1] = first + model.unknowns;
    const tied = tiesOf(adjusted);
    for (let row = 0; row < model.weights.length; row++) {
      if (tied.has(row)) continue;
      const [from, to] = [model.rowStart[row], model.rowStart[row + 1]];
      add(
        Array.from(model.columns.subarray(from, to), (column) => first + column),
        Array.from(solution.coefficients.subarray(from, to)),
        solution.residuals[row],
        1 / Math.sqrt(model.weights[row]),
      );
    }
    const telling = fullyRead(adjusted);
    const seen = new Map<JointMark, TellingRow[]>();
    for (const [held, { name, axis, sigma }] of tied) {
      const known = marks.get(jointKey(adjusted.input.control.get(name)!))!;
      const unknown = first + model.markUnknown(name) + axis;
      const row = add([unknown, known.first + axis], [1, -1], solution.residuals[held], sigma);
      if (!telling.has(name)) continue;
      const own = seen.get(known) ?? [];
      own.push({ row, axis, coefficient: -1 });
      seen.set(known, own);
    }
    for (const [known, own] of seen) see(known, id, observedAt, own);
  });

  for (const { mark, first, axes } of marks.values()) {
    for (let axis = 0; axis < axes; axis++)
      add([first + axis], [1], 0, axis === 2 ? mark.verticalSigma : mark.horizontalSigma);
  }
  for (const { id, from, to, difference, sigma, observedAt } of levels) {
    const [low, high] = [marks.get(jointKey(from)), marks.get(jointKey(to))];
    if (low?.axes !== 3 || high?.axes !== 3) continue;
    const published = high.mark.elevation! - low.mark.elevation!;
    const row = add([high.first + 2, low.first + 2], [1, -1], difference - published, sigma);
    see(high, id, observedAt, [{ row, axis: 2, coefficient: 1 }]);
    see(low, id, observedAt, [{ row, axis: 2, coefficient: -1 }]);
  }
  for (const own of sightings.values()) own.sort((a, b) => a.observedAt - b.observedAt);

  const structure = rows.build();
  return {
    ...structure,
    unknowns: blocks[setups.length],
    shared,
    blocks,
    marks: [...marks.values()],
    sightings,
    linearise(x, into, residuals) {
      into.set(coefficients);
      for (let row = 0; row < misclosures.length; row++) {
        let fitted = 0;
        for (let e = structure.rowStart[row]; e < structure.rowStart[row + 1]; e++)
          fitted += coefficients[e] * x[structure.columns[e]];
        residuals[row] = misclosures[row] - fitted;
      }
    },
  };
}

interface Tie {
  name: string;
  axis: number;
  sigma: number;
}

/** The rows of a setup by which published coordinates hold its marks, and what else lies between both. */
function tiesOf({ model, erections, input }: AdjustedStation): Map<number, Tie> {
  const ties = new Map<number, Tie>();
  for (const name of model.marks) {
    const standing = erections.filter(({ target }) => target === name);
    const [one] = standing;
    const own = standing.length > 1 ? [0, 0, 0] : [one.centringSigma, one.centringSigma, one.heightSigma];
    const axes = input.control.get(name)!.elevation === null ? 2 : 3;
    for (let axis = 0; axis < axes; axis++) {
      const held = model.heldRow(model.markUnknown(name) + axis);
      ties.set(held, { name, axis, sigma: Math.max(own[axis], STEADY) });
    }
  }
  return ties;
}

/** Marks that were read by direction and distance, and by zenith angle where they have an elevation. */
function fullyRead({ readings, erections, input }: AdjustedStation): Set<string> {
  const kinds = new Map<string, Set<string>>();
  for (const { kind, erection } of readings) {
    const { target } = erections[erection];
    kinds.set(target, (kinds.get(target) ?? new Set()).add(kind));
  }
  const wanted = (name: string) =>
    input.control.get(name)!.elevation === null
      ? ['direction', 'distance']
      : ['direction', 'distance', 'zenith'];
  return new Set([...kinds].flatMap(([name, read]) => (wanted(name).every((k) => read.has(k)) ? name : [])));
}
