import type { ControlMark } from './shots';

/** Cells a point, on the whole: the rows of cells that a ring crosses are then few, and few points lie in them. */
const CELLS_PER_POINT = 1;
/** Share of the points that may lie beyond the cells on each side, so that one point astray does not widen them all. */
const BEYOND = 0.01;

/** A mark among others at the same place: it stands for them. */
export interface SamePlace {
  target: string;
  others: string[];
}

/**
 * Control points laid out to be found by place and by distance from each other: sorted into the rows of a square grid
 * of cells, so that a stretch of a row is a stretch of the arrays. Points beyond the cells count to the outermost ones.
 *
 * Of points at one place, within one standard deviation of their difference, one stands for all: a trusted one before
 * a suspect one, then the better known, then the first by name. Quarantined points are not in it.
 */
export class ControlIndex {
  readonly marks: readonly ControlMark[];
  /** By mark, m; `up` is NaN where a mark has no elevation. */
  readonly east: Float64Array;
  readonly north: Float64Array;
  readonly up: Float64Array;
  readonly horizontal: Float64Array;
  readonly vertical: Float64Array;
  /** Largest standard deviations, m. */
  readonly worstHorizontal: number;
  readonly worstVertical: number;
  readonly samePlace: readonly SamePlace[];
  private readonly cell: number;
  private readonly columns: number;
  private readonly rows: number;
  private readonly west: number;
  private readonly south: number;
  private readonly cellStart: Int32Array;

  constructor(control: Iterable<ControlMark>) {
    const all: ControlMark[] = [];
    for (const mark of control) if (mark.status !== 'quarantined') all.push(mark);
    const count = all.length;
    // Each field is read once: going through the objects again and again takes longer than all the rest.
    const east = new Float64Array(count);
    const north = new Float64Array(count);
    for (let i = 0; i < count; i++) {
      east[i] = all[i].easting;
      north[i] = all[i].northing;
    }
    const [west, right] = reach(east);
    const [south, top] = reach(north);
    const [width, depth] = [Math.max(right - west, 1), Math.max(top - south, 1)];
    this.cell = Math.sqrt((width * depth) / (CELLS_PER_POINT * Math.max(count, 1)));
    this.columns = Math.ceil(width / this.cell);
    this.rows = Math.ceil(depth / this.cell);
    this.west = west;
    this.south = south;
    this.cellStart = new Int32Array(this.rows * this.columns + 1);
    const order = this.sorted(all, east, north);
    this.marks = Array.from(order, (i) => all[i]);
    this.east = permuted(east, order);
    this.north = permuted(north, order);
    this.up = new Float64Array(count);
    this.horizontal = new Float64Array(count);
    this.vertical = new Float64Array(count);
    let [worstHorizontal, worstVertical] = [0, 0];
    for (let i = 0; i < count; i++) {
      const { elevation, horizontalSigma, verticalSigma } = this.marks[i];
      this.up[i] = elevation ?? Number.NaN;
      this.horizontal[i] = horizontalSigma;
      this.vertical[i] = verticalSigma;
      if (horizontalSigma > worstHorizontal) worstHorizontal = horizontalSigma;
      if (verticalSigma > worstVertical) worstVertical = verticalSigma;
    }
    this.worstHorizontal = worstHorizontal;
    this.worstVertical = worstVertical;
    this.samePlace = this.standIns();
  }

  /**
   * Calls `found` with each mark of a square about a place, those somewhat beyond it included.
   *
   * @returns how many those were
   */
  near(east: number, north: number, radius: number, found: (mark: number) => void): number {
    let compared = 0;
    const [first, last] = [this.column(east - radius), this.column(east + radius)];
    for (let row = this.row(north - radius), end = this.row(north + radius); row <= end; row++) {
      const stop = this.cellStart[row * this.columns + last + 1];
      const start = this.cellStart[row * this.columns + first];
      compared += stop - start;
      for (let i = start; i < stop; i++) found(i);
    }
    return compared;
  }

  /**
   * Calls `found` with each pair of marks, in both orders, whose distance and whose difference of heights lie within
   * tolerances; a mark without elevation has any height.
   *
   * @param most comparisons of marks before it gives up
   * @param found says whether to go on
   * @returns how many comparisons it took; more than `most` where it gave up for them
   */
  pairs(
    wanted: { distance: number; rise: number },
    tolerance: { distance: number; rise: number },
    most: number,
    found: (from: number, to: number) => boolean,
  ): number {
    const { east, north, up, cell, cellStart, columns } = this;
    const outer = wanted.distance + tolerance.distance;
    const inner = Math.max(0, wanted.distance - tolerance.distance);
    const [outer2, inner2] = [outer * outer, inner * inner];
    let compared = 0;
    let go = true;
    const stretch = (from: number, row: number, first: number, last: number) => {
      const stop = cellStart[row * columns + last + 1];
      const start = cellStart[row * columns + first];
      compared += stop - start;
      for (let to = start; to < stop && go; to++) {
        const de = east[to] - east[from];
        const dn = north[to] - north[from];
        // One half of the plane only: the other one comes as pairs of the other order.
        if (dn < 0 || (dn === 0 && de <= 0)) continue;
        const square = de * de + dn * dn;
        if (!(square >= inner2 && square <= outer2)) continue;
        const rise = up[to] - up[from];
        // Not beyond the tolerance, or not a number.
        if (!(Math.abs(rise - wanted.rise) > tolerance.rise)) go = found(from, to);
        if (go && !(Math.abs(rise + wanted.rise) > tolerance.rise)) go = found(to, from);
      }
    };
    for (let from = 0; from < east.length && go && compared <= most; from++) {
      const [e, n] = [east[from], north[from]];
      const [own, top] = [this.row(n), this.row(n + outer)];
      for (let row = own; row <= top; row++) {
        // How far north of the mark the row begins and ends; the outermost ones have no end.
        const begin = row === own ? 0 : Math.max(0, this.south + row * cell - n);
        const end = row === this.rows - 1 ? Number.POSITIVE_INFINITY : this.south + (row + 1) * cell - n;
        const wide = Math.sqrt(Math.max(0, outer2 - begin * begin));
        const narrow = end < inner ? Math.sqrt(inner2 - end * end) : 0;
        const [first, last] = [this.column(e - wide), this.column(e + wide)];
        if (narrow > cell) {
          const left = this.column(e - narrow);
          stretch(from, row, first, left);
          const right = Math.max(left + 1, this.column(e + narrow));
          if (right <= last) stretch(from, row, right, last);
        } else stretch(from, row, first, last);
      }
    }
    return compared;
  }

  private column(east: number): number {
    return Math.min(this.columns - 1, Math.max(0, Math.floor((east - this.west) / this.cell)));
  }

  private row(north: number): number {
    return Math.min(this.rows - 1, Math.max(0, Math.floor((north - this.south) / this.cell)));
  }

  /** Marks cell by cell, within a cell by their place: in whatever order they came, the search takes them in one. */
  private sorted(all: readonly ControlMark[], east: Float64Array, north: Float64Array): Int32Array {
    const { cellStart, columns } = this;
    const count = all.length;
    const cells = new Int32Array(count);
    for (let i = 0; i < count; i++) {
      cells[i] = this.row(north[i]) * columns + this.column(east[i]);
      cellStart[cells[i] + 1]++;
    }
    for (let cell = 1; cell < cellStart.length; cell++) cellStart[cell] += cellStart[cell - 1];
    const before = (a: number, b: number) =>
      north[a] !== north[b]
        ? north[a] < north[b]
        : east[a] !== east[b]
          ? east[a] < east[b]
          : all[a].name < all[b].name;
    const next = cellStart.slice();
    const order = new Int32Array(count);
    for (let i = 0; i < count; i++) {
      // Put in among the few of its cell.
      let at = next[cells[i]]++;
      for (; at > cellStart[cells[i]] && before(i, order[at - 1]); at--) order[at] = order[at - 1];
      order[at] = i;
    }
    return order;
  }

  /** Takes marks that another one stands for out of every search: they are nowhere. */
  private standIns(): SamePlace[] {
    const { marks, east, north, up, horizontal, vertical } = this;
    const touching = new Map<number, number[]>();
    let i = 0;
    const touches = (j: number) => {
      if (j === i) return;
      const apart = (east[i] - east[j]) ** 2 + (north[i] - north[j]) ** 2;
      if (apart > horizontal[i] ** 2 + horizontal[j] ** 2) return;
      if ((up[i] - up[j]) ** 2 > vertical[i] ** 2 + vertical[j] ** 2) return;
      touching.set(i, [...(touching.get(i) ?? []), j]);
    };
    for (; i < marks.length; i++) {
      this.near(east[i], north[i], Math.hypot(horizontal[i], this.worstHorizontal), touches);
    }
    const standIns = new Map<number, string[]>();
    const gone = new Set<number>();
    for (const one of [...touching.keys()].sort((a, b) => byPreference(marks[a], marks[b]))) {
      if (gone.has(one)) continue;
      const others = touching.get(one)!.filter((j) => !gone.has(j) && !standIns.has(j));
      for (const j of others) gone.add(j);
      if (others.length > 0) {
        standIns.set(
          one,
          others.map((j) => marks[j].name),
        );
      }
    }
    for (const j of gone) {
      east[j] = Number.NaN;
      north[j] = Number.NaN;
    }
    return [...standIns].map(([one, others]) => ({ target: marks[one].name, others: others.sort() }));
  }
}

/** Where values begin and end, but for the outermost ones. */
function reach(values: Float64Array): [number, number] {
  const sorted = values.slice().sort();
  const beyond = Math.floor(BEYOND * sorted.length);
  return [sorted[beyond] ?? 0, sorted[sorted.length - 1 - beyond] ?? 0];
}

function permuted(values: Float64Array, order: Int32Array): Float64Array {
  const result = new Float64Array(values.length);
  for (let i = 0; i < result.length; i++) result[i] = values[order[i]];
  return result;
}

function byPreference(a: ControlMark, b: ControlMark): number {
  const trust = (mark: ControlMark) => (mark.status === 'trusted' ? 0 : 1);
  const known = (mark: ControlMark) => (mark.elevation === null ? 1 : 0);
  return (
    trust(a) - trust(b) ||
    known(a) - known(b) ||
    a.horizontalSigma - b.horizontalSigma ||
    a.verticalSigma - b.verticalSigma ||
    compare(a.name, b.name)
  );
}

function compare(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0;
}
