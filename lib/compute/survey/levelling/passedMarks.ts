import type { KnownHeight, LevelRun } from './levelRun';

/** A known mark that a run came by, and what it says of it; metres. */
export interface PassedMark {
  point: string;
  /** Line of the book. */
  line: number;
  role: 'passed' | 'end';
  published: number;
  levelled: number;
  /** Levelled minus published. */
  difference: number;
  /** Of the difference: the levelled height and the published one. */
  standardDeviation: number;
  /** |difference| is within two standard deviations. */
  agrees: boolean;
}

/** Standard deviations that a difference may have and still agree, about 95 %. */
const AGREEING = 2;

/**
 * What a run says of the marks on its way. A run that closes holds its points between both ends; the end is judged by
 * the misclosure itself, of which start and end share the blame.
 *
 * @param known elevations of the site, by name
 */
export function passedMarks(
  { lines, closure }: LevelRun,
  known: ReadonlyMap<string, KnownHeight>,
): PassedMark[] {
  const ends = [lines[0].point, lines[lines.length - 1].point];
  return lines.flatMap((line, i): PassedMark[] => {
    const mark = known.get(line.point);
    if (line.kind === 'end' && closure.kind === 'marks' && mark) {
      return [markOf(i, mark, 'end', mark.elevation + (closure.misclosure ?? 0), closure.standardDeviation)];
    }
    if (!mark || ends.includes(line.point)) return [];
    const sigma = Math.hypot(line.standardDeviation, mark.sigma);
    return [markOf(i, mark, 'passed', line.elevation, sigma)];
  });
}

function markOf(
  line: number,
  mark: KnownHeight,
  role: PassedMark['role'],
  levelled: number,
  standardDeviation: number,
): PassedMark {
  const difference = levelled - mark.elevation;
  return {
    point: mark.name,
    line,
    role,
    published: mark.elevation,
    levelled,
    difference,
    standardDeviation,
    agrees: Math.abs(difference) <= AGREEING * standardDeviation,
  };
}

/** Where the error of a run that does not close came in. */
export type ErrorPlace =
  | { kind: 'between'; after: string; before: string }
  /** All other marks agree among themselves, and differ from the start by the same. */
  | { kind: 'start'; point: string; difference: number };

/**
 * Bounds the error of a run that exceeds its limit by the known marks that it passed; null where none of them tells.
 * Where two or more marks differ by the same amount, the start is off from them all, not each of them from it.
 */
export function errorPlace(run: LevelRun, passed: readonly PassedMark[]): ErrorPlace | null {
  if (passed.length < 2) return null;
  const start = run.lines[0].point;
  const firstOff = passed.findIndex(({ agrees }) => !agrees);
  if (firstOff < 0) return null;
  const mean = passed.reduce((sum, { difference }) => sum + difference, 0) / passed.length;
  const alike = passed.every(
    ({ difference, standardDeviation }) => Math.abs(difference - mean) <= AGREEING * standardDeviation,
  );
  if (firstOff === 0 && alike) return { kind: 'start', point: start, difference: mean };
  const after = firstOff === 0 ? start : passed[firstOff - 1].point;
  return { kind: 'between', after, before: passed[firstOff].point };
}

/** Whole figures of a staff that are read wrong: a unit or a tenth of one. */
const MISREAD = [1, 0.1];

/**
 * The figure of the staff that a misclosure looks like, m; null where it looks like none. Only where the run's own
 * spread leaves no doubt which it would be.
 *
 * @param unit of the staff's graduation, m
 * @param sigma of the misclosure, m
 */
export function misreadFigure(misclosure: number, unit: number, sigma: number): number | null {
  for (const figure of MISREAD) {
    const size = figure * unit;
    if (AGREEING * sigma < size / 4 && Math.abs(Math.abs(misclosure) - size) <= AGREEING * sigma) return size;
  }
  return null;
}
