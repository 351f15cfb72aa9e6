/** A place for each name in a plan: beside its mark, off lines, arrows and other names as far as there is room. */

export interface Box {
  x: number;
  y: number;
  width: number;
  height: number;
}

export type Segment = readonly [x1: number, y1: number, x2: number, y2: number];

export interface Obstacles {
  boxes: readonly Box[];
  segments: readonly Segment[];
}

export interface Wanted {
  /** What is named. */
  x: number;
  y: number;
  /** Free room around it. */
  gap: number;
  width: number;
  height: number;
}

export interface Place {
  /** Where the text hangs, and its upper edge. */
  x: number;
  top: number;
  anchor: 'start' | 'middle' | 'end';
}

/** Sides to try, as shares of the gap and of the text's own size; the first ones are liked best. */
const SIDES = [
  { anchor: 'start', dx: 1, dy: 0, up: 0.5 },
  { anchor: 'end', dx: -1, dy: 0, up: 0.5 },
  { anchor: 'start', dx: 0.6, dy: -0.7, up: 1 },
  { anchor: 'end', dx: -0.6, dy: -0.7, up: 1 },
  { anchor: 'start', dx: 0.6, dy: 0.7, up: 0 },
  { anchor: 'end', dx: -0.6, dy: 0.7, up: 0 },
  { anchor: 'middle', dx: 0, dy: -1, up: 1 },
  { anchor: 'middle', dx: 0, dy: 1, up: 0 },
] as const;
/** Share of the text's width that lies left of where it hangs. */
const LEFT = { start: 0, middle: 0.5, end: 1 } as const;
/** What a side costs beside the one before it: less than crossing a line. */
const STEP = 2;
const OUTSIDE = 1e4;

export function placeLabels(
  labels: readonly Wanted[],
  { boxes, segments }: Obstacles,
  frame: { width: number; height: number },
): Place[] {
  const taken = [...boxes];
  return labels.map((label) => {
    const tried = SIDES.map(({ anchor, dx, dy, up }, i) => {
      const x = label.x + dx * label.gap;
      const top = label.y + dy * label.gap - up * label.height;
      const box = { x: x - LEFT[anchor] * label.width, y: top, width: label.width, height: label.height };
      const cost = i * STEP + burden(box, { boxes: taken, segments }) + (isInside(box, frame) ? 0 : OUTSIDE);
      return { place: { x, top, anchor }, box, cost };
    });
    const best = tried.reduce((least, one) => (one.cost < least.cost ? one : least));
    taken.push(best.box);
    return best.place;
  });
}

/** How much of what is drawn already lies under a box. */
export function burden(box: Box, { boxes, segments }: Obstacles): number {
  const covered = boxes.reduce((sum, other) => sum + overlap(box, other), 0);
  return covered + segments.reduce((sum, segment) => sum + 4 * lengthInside(segment, box), 0);
}

function isInside({ x, y, width, height }: Box, frame: { width: number; height: number }): boolean {
  return x >= 4 && y >= 4 && x + width <= frame.width - 4 && y + height <= frame.height - 4;
}

function overlap(a: Box, b: Box): number {
  const width = Math.min(a.x + a.width, b.x + b.width) - Math.max(a.x, b.x);
  const height = Math.min(a.y + a.height, b.y + b.height) - Math.max(a.y, b.y);
  return width > 0 && height > 0 ? width * height : 0;
}

/** Clips a segment to a box, axis by axis (Liang and Barsky 1984). */
function lengthInside([x1, y1, x2, y2]: Segment, box: Box): number {
  let [from, to] = [0, 1];
  for (const [start, step, low, high] of [
    [x1, x2 - x1, box.x, box.x + box.width],
    [y1, y2 - y1, box.y, box.y + box.height],
  ]) {
    if (step === 0) {
      if (start < low || start > high) return 0;
    } else {
      const [a, b] = [(low - start) / step, (high - start) / step];
      from = Math.max(from, Math.min(a, b));
      to = Math.min(to, Math.max(a, b));
    }
  }
  return to > from ? (to - from) * Math.hypot(x2 - x1, y2 - y1) : 0;
}
