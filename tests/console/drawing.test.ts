import { describe, expect, it } from 'vitest';
import { burden, placeLabels, type Segment } from '@/app/ui/draw/labels';
import { largestUsual } from '@/app/ui/draw/ResidualHistory';

const FRAME = { width: 640, height: 560 };

describe('names in a plan', () => {
  it('stand off rays, arrows and each other', () => {
    const marks = [
      { x: 300, y: 280 },
      { x: 330, y: 290 },
      { x: 80, y: 60 },
    ];
    const segments: Segment[] = [
      [300, 280, 420, 280],
      [330, 290, 200, 290],
      [80, 60, 126, 60],
    ];
    const boxes = marks.map(({ x, y }) => ({ x: x - 9, y: y - 9, width: 18, height: 18 }));
    const wanted = marks.map((mark) => ({ ...mark, gap: 13, width: 70, height: 17 }));
    const places = placeLabels(wanted, { boxes, segments }, FRAME);
    const left = { start: 0, middle: 0.5, end: 1 };
    const drawn = places.map(({ x, top, anchor }) => ({
      x: x - left[anchor] * 70,
      y: top,
      width: 70,
      height: 17,
    }));
    for (const [i, box] of drawn.entries())
      expect(burden(box, { boxes: [...boxes, ...drawn.filter((_, j) => j !== i)], segments })).toBe(0);
  });

  it('stay inside the drawing', () => {
    const [east, west] = placeLabels(
      [630, 10].map((x) => ({ x, y: 300, gap: 13, width: 90, height: 17 })),
      { boxes: [], segments: [] },
      FRAME,
    );
    expect([east.anchor, west.anchor]).toEqual(['end', 'start']);
  });
});

describe('the scale of what a point showed', () => {
  it('is not set by one blunder, and by the largest where there is none', () => {
    expect(largestUsual([0.001, 0.002, 460.2, 0.003, 0.002])).toBe(0.003);
    expect(largestUsual([0.01, 0.02, 0.04])).toBe(0.04);
    expect(largestUsual([0.05])).toBe(0.05);
    expect(largestUsual([0, 0])).toBe(0.001);
  });
});
