import type { SuspectedEntry } from '@/lib/compute/adjustment/suspicions';
import type { ReadingKind } from './faces';
import type { Fault } from './fault';
import { type AdjustedStation, marksOfKind } from './stationAdjustment';
import { AXIS, EASTING, NORTHING } from './stationModel';

/** A fault that enters the observations linearly: its size is estimated beside the station. */
export interface Suspicion {
  fault: Fault;
  subject: string[];
  entries: SuspectedEntry[];
  /** Usual size of each of its parts, one standard deviation, m, ratio or rad. */
  usual: number[];
  sizeOf: (estimate: readonly number[]) => number;
  /** Only a part of the fault shows: it may be larger. */
  atLeast?: boolean;
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
  /** A tripod that was kicked or sinks, m sideways and in height, and how far the circle turns with it, rad. */
  shift: 0.02,
  sinking: 0.01,
  turn: 60 * ARCSECOND,
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
 * Without a distance only what lies across the sight shows, without a direction only what lies along it.
 */
function ofMarks({ input, model, readings, erections }: AdjustedStation): Suspicion[] {
  // The direction to one mark alone orients the circle, and says nothing of the mark.
  const orient = marksOfKind('direction', readings, erections, input.control).length > 1;
  return model.marks.flatMap((name): Suspicion[] => {
    const own = readings.flatMap(({ erection, kind }, row) =>
      erections[erection].target === name ? { row, kind } : [],
    );
    const rowsOf = (kind: ReadingKind) =>
      own.flatMap((reading) => (reading.kind === kind ? reading.row : []));
    const directions = orient || input.occupied ? rowsOf('direction') : [];
    const distances = rowsOf('distance');
    const first = model.markUnknown(name);
    const held = (unknown: number, fault: number) => ({
      row: model.heldRow(unknown),
      fault,
      coefficient: -1,
    });
    const subject = [name];
    const plan: SuspectedEntry[] = [];
    let parts = 1;
    let sizeOf = length;
    if (directions.length > 0 && distances.length > 0) {
      plan.push(held(first, 0), held(first + 1, 1));
      parts = 2;
    } else {
      const [east, north] = [model.start[first], model.start[first + 1]];
      const away = Math.hypot(east - model.start[EASTING], north - model.start[NORTHING]);
      plan.push(...directions.map((row) => ({ row, fault: 0, coefficient: 1 / away })));
      plan.push(...distances.map((row) => ({ row, fault: 0, coefficient: 1 })));
      // From the published place to the line of the sight, or to its distance: no nearer can the mark be.
      sizeOf = ([miss]) =>
        distances.length > 0 ? Math.abs(miss) : away * Math.sin(Math.min(Math.abs(miss) / away, Math.PI / 2));
    }
    const hasHeight = rowsOf('zenith').length > 0 && model.heldRow(first + 2) >= 0;
    const lifted = (fault: number) => (hasHeight ? [held(first + 2, fault)] : []);
    const suspicions: Suspicion[] = [];
    if (plan.length > 0) {
      suspicions.push({
        fault: 'targetMoved',
        subject,
        entries: [...plan, ...lifted(parts)],
        usual: [...Array<number>(parts).fill(USUAL.moved), ...(hasHeight ? [USUAL.lifted] : [])],
        sizeOf,
        atLeast: parts < 2,
      });
    }
    if (hasHeight) {
      suspicions.push({
        fault: 'heightOfTargetOrMark',
        subject,
        entries: lifted(0),
        usual: [USUAL.height],
        sizeOf: single,
      });
    }
    return suspicions;
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
