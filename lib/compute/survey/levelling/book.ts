/** A line of a level book: what was read on the staff at one point, in metres. */
export interface LevelSight {
  point: string;
  /** Readings grow upwards from the foot of the staff; one held upside down, foot on a soffit, reads negative. */
  backsight: number | null;
  backsightDistance: number | null;
  intermediate: number | null;
  intermediateDistance: number | null;
  foresight: number | null;
  foresightDistance: number | null;
  /** The elevation that the book itself has on this line. */
  bookedElevation: number | null;
}

/** One standing of the level: a backsight, what was read between, and a foresight; indices of lines. */
export interface LevelStation {
  back: number;
  between: number[];
  fore: number;
}

export interface BookFault {
  line: number;
  field: keyof LevelSight;
  code: 'reading_missing' | 'readings_exclusive' | 'distance_missing' | 'distance_alone';
  detail: string;
}

const SIDES = ['backsight', 'intermediate', 'foresight'] as const;

/**
 * What keeps a book from being a run: it begins with a backsight alone, turns on points that have a foresight and a
 * backsight, and ends with a foresight alone. Distances stand with every backsight and foresight or with none: half of
 * them would say nothing of the balance.
 */
export function faultsOfBook(sights: readonly LevelSight[]): BookFault[] {
  const last = sights.length - 1;
  const measured = sights.some(
    (sight) => sight.backsightDistance !== null || sight.foresightDistance !== null,
  );
  return sights.flatMap((sight, line) => {
    const found: BookFault[] = [];
    const fault = (field: BookFault['field'], code: BookFault['code'], detail: string) =>
      found.push({ line, field, code, detail });
    const { point, backsight, intermediate, foresight } = sight;
    if (intermediate !== null && (backsight !== null || foresight !== null)) {
      fault('intermediate', 'readings_exclusive', `${point} is read between and turned on at once.`);
    } else if (line === 0) {
      if (backsight === null) fault('backsight', 'reading_missing', 'A run begins with a backsight.');
      if (foresight !== null || intermediate !== null)
        fault(
          foresight === null ? 'intermediate' : 'foresight',
          'readings_exclusive',
          'The first line has a backsight alone.',
        );
      if (last === 0) fault('point', 'reading_missing', 'Nothing follows the first backsight.');
    } else if (line === last) {
      if (foresight === null) fault('foresight', 'reading_missing', 'A run ends with a foresight.');
      if (backsight !== null)
        fault('backsight', 'readings_exclusive', 'Nothing was read after the last backsight.');
    } else if (intermediate === null) {
      const missing = [backsight === null && 'backsight', foresight === null && 'foresight'].filter(Boolean);
      if (missing.length === 2) fault('point', 'reading_missing', `${point} has no reading.`);
      else if (missing.length === 1)
        fault(
          missing[0] as 'backsight' | 'foresight',
          'reading_missing',
          `${point} has no ${missing[0]}: a turning point has both, from the standing before and the one after.`,
        );
    }
    for (const side of SIDES) {
      const distance = `${side}Distance` as const;
      if (sight[side] === null && sight[distance] !== null)
        fault(distance, 'distance_alone', `${point} has a ${distance} and no ${side}.`);
      if (measured && side !== 'intermediate' && sight[side] !== null && sight[distance] === null)
        fault(
          distance,
          'distance_missing',
          `${point} has no ${distance}, other sights of the run have theirs.`,
        );
    }
    return found;
  });
}

/** The standings of the level in a book without faults. */
export function stationsOf(sights: readonly LevelSight[]): LevelStation[] {
  const stations: LevelStation[] = [];
  let open: Omit<LevelStation, 'fore'> = { back: 0, between: [] };
  sights.forEach(({ intermediate, foresight }, line) => {
    if (intermediate !== null) open.between.push(line);
    if (foresight === null) return;
    stations.push({ ...open, fore: line });
    open = { back: line, between: [] };
  });
  return stations;
}

export interface PageCheck {
  backsights: number;
  foresights: number;
  rises: number;
  falls: number;
  /** Last minus first elevation, by heights of collimation. */
  difference: number;
  /** ΣBS − ΣFS = Σrises − Σfalls = last − first. */
  agrees: boolean;
}

/** Sums of doubles differ by less than this, m, where the figures are right. */
const NOISE = 1e-9;

/**
 * The arithmetic check at the foot of a level book's page (common practice): the sums of the readings, of the rises
 * and falls from reading to reading, and the two ends as reduced by heights of collimation say the same.
 */
export function pageCheck(sights: readonly LevelSight[], first: number, last: number): PageCheck {
  const sums = { backsights: 0, foresights: 0, rises: 0, falls: 0 };
  let before = 0;
  sights.forEach(({ backsight, intermediate, foresight }, line) => {
    const reading = intermediate ?? foresight;
    if (line > 0 && reading !== null) {
      const rise = before - reading;
      if (rise > 0) sums.rises += rise;
      else sums.falls -= rise;
      before = reading;
    }
    sums.foresights += foresight ?? 0;
    sums.backsights += backsight ?? 0;
    before = backsight ?? before;
  });
  const difference = last - first;
  const same = (other: number) => Math.abs(difference - other) < NOISE;
  const agrees = same(sums.backsights - sums.foresights) && same(sums.rises - sums.falls);
  return { ...sums, difference, agrees };
}
