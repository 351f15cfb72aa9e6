import type { SuspectedEntry } from '@/lib/compute/adjustment/suspicions';
import type { Fault } from './fault';
import type { AdjustedStation } from './stationAdjustment';
import { AXIS, EASTING, NORTHING } from './stationModel';

/** A fault that enters the observations linearly: its size is estimated beside the station. */
export interface Suspicion {
  fault: Fault;
  subject: string[];
  entries: SuspectedEntry[];
  /** Usual size of each of its parts, one standard deviation, m, ratio or rad. */
  usual: number[];
  sizeOf: (estimate: readonly number[]) => number;
}

const ARCSECOND = Math.PI / 648_000;

/** Usual sizes of faults (common practice, from memory). */
export const USUAL = {
  /** Prism constants in use lie some centimetres apart, m. */
  constant: 0.03,
  /** A forgotten or doubled atmospheric correction, ratio. */
  scale: 50e-6,
  /** A post that a truck brushed, m: sideways and up or down. */
  moved: 0.1,
  lifted: 0.03,
  /** A rod read at the wrong mark, m. */
  height: 0.15,
  /** Collimation or index after a knock, rad. */
  face: 60 * ARCSECOND,
};

const single = ([estimate]: readonly number[]) => estimate;
const length = (estimate: readonly number[]) => Math.hypot(...estimate);

/** Every single fault that the shots of a setup could show. */
export function suspicionsOf(adjusted: AdjustedStation): Suspicion[] {
  return [...ofDistances(adjusted), ...ofFaces(adjusted), ...ofMarks(adjusted), ...ofOccupation(adjusted)];
}

/** All distances too long by the same, or by the same ratio; one distance alone cannot tell. */
function ofDistances({ readings }: AdjustedStation): Suspicion[] {
  const rows = readings.flatMap(({ kind }, row) => (kind === 'distance' ? row : []));
  if (rows.length < 2) return [];
  const entries = (coefficient: (row: number) => number) =>
    rows.map((row) => ({ row, fault: 0, coefficient: coefficient(row) }));
  const common = { subject: [], sizeOf: single };
  return [
    { ...common, fault: 'distanceConstant', entries: entries(() => 1), usual: [USUAL.constant] },
    {
      ...common,
      fault: 'distanceScale',
      entries: entries((row) => readings[row].value),
      usual: [USUAL.scale],
    },
  ];
}

/** Collimation and index left in readings of one face only, beyond what the instrument states. */
function ofFaces({ readings }: AdjustedStation): Suspicion[] {
  const collimation: SuspectedEntry[] = [];
  const index: SuspectedEntry[] = [];
  for (const [row, { kind, erection, set, face }] of readings.entries()) {
    if (face === 0) continue;
    if (kind === 'zenith') index.push({ row, fault: 0, coefficient: face });
    if (kind !== 'direction') continue;
    const zenith = readings.find((r) => r.kind === 'zenith' && r.erection === erection && r.set === set);
    collimation.push({ row, fault: 0, coefficient: face / Math.sin(zenith?.value ?? Math.PI / 2) });
  }
  return [collimation, index]
    .filter((entries) => entries.length > 0)
    .map((entries) => ({
      fault: 'singleFace',
      subject: [],
      entries,
      usual: [USUAL.face],
      sizeOf: single,
    }));
}

/**
 * A mark that stands elsewhere than published, or a reflector or mark whose height is wrong: ∇ is the place that the
 * shots give minus the published one. The height of a target and a mark that settled look the same from one setup.
 */
function ofMarks({ model }: AdjustedStation): Suspicion[] {
  return model.marks.flatMap((name): Suspicion[] => {
    const first = model.markUnknown(name);
    const rows = [first, first + 1, first + 2].map((unknown) => model.heldRow(unknown));
    const entries = rows.flatMap((row, fault) => (row < 0 ? [] : { row, fault, coefficient: -1 }));
    const subject = [name];
    const hasHeight = rows[2] >= 0;
    const usual = [USUAL.moved, USUAL.moved, ...(hasHeight ? [USUAL.lifted] : [])];
    const moved: Suspicion = { fault: 'targetMoved', subject, entries, usual, sizeOf: length };
    if (!hasHeight) return [moved];
    const height: Suspicion = {
      fault: 'heightOfTargetOrMark',
      subject,
      entries: [{ row: rows[2], fault: 0, coefficient: -1 }],
      usual: [USUAL.height],
      sizeOf: single,
    };
    return [moved, height];
  });
}

/** An instrument that does not stand over its mark, or over another one, and one whose height was misread. */
function ofOccupation({ input, model }: AdjustedStation): Suspicion[] {
  if (!input.occupied) return [];
  const subject = [input.occupied.mark.name];
  const held = (unknowns: readonly number[]) =>
    unknowns.map((unknown, fault) => ({ row: model.heldRow(unknown), fault, coefficient: -1 }));
  const moved: Suspicion = {
    fault: 'stationMoved',
    subject,
    entries: held([EASTING, NORTHING]),
    usual: [USUAL.moved, USUAL.moved],
    sizeOf: length,
  };
  if (input.occupied.mark.elevation === null) return [moved];
  const height: Suspicion = {
    fault: 'instrumentHeight',
    subject,
    entries: held([AXIS]),
    usual: [USUAL.height],
    sizeOf: single,
  };
  return [moved, height];
}
