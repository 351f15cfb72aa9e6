import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { shiftByOffset } from '@/lib/compute/grade/lotOffset';
import { whereabouts } from '@/lib/compute/grade/whereabouts';

/** A lot of 7 × 7 places, 20 m apart; rows from the south. */
const LOT = Array.from({ length: 49 }, (_, i) => ({
  easting: 500_000 + 20 * (i % 7),
  northing: 4_000_000 + 20 * Math.floor(i / 7),
}));
/** Places of the lot by column and row. */
const at = (...places: [number, number][]) => places.map(([column, row]) => row * 7 + column);

describe('where places of a lot lie', () => {
  it('is a corner, a side or the middle where they all lie there', () => {
    const part = (...places: [number, number][]) => whereabouts(LOT, at(...places)).part;
    expect(part([6, 6], [5, 6], [6, 5])).toBe('north-east corner');
    expect(part([0, 0], [1, 1])).toBe('south-west corner');
    expect(part([0, 6])).toBe('north-west corner');
    expect(part([6, 0], [5, 1])).toBe('south-east corner');
    expect(part([0, 6], [3, 6], [6, 5])).toBe('north side');
    expect(part([0, 1], [0, 3], [1, 6])).toBe('west side');
    expect(part([3, 3])).toBe('middle');
  });

  it('is nowhere where they lie about, though their mean lies somewhere', () => {
    const about = at([6, 6], [0, 0], [6, 3], [3, 6]);
    expect(whereabouts(LOT, about)).toEqual({ part: null, strays: about });
    // Both on the inner side of the corner: the quarter is no corner.
    expect(whereabouts(LOT, at([3, 3], [6, 6])).part).toBeNull();
  });

  it('is where four of five lie, the fifth a stray', () => {
    const some = at([6, 6], [5, 6], [6, 5], [5, 5], [0, 1]);
    expect(whereabouts(LOT, some)).toEqual({ part: 'north-east corner', strays: [some[4]] });
    expect(whereabouts(LOT, [...some, ...at([0, 0])]).part).toBeNull();
  });

  it('is the whole lot where it is nearly all of it', () => {
    const all = LOT.map((_, i) => i);
    expect(whereabouts(LOT, all).part).toBe('whole lot');
    expect(whereabouts(LOT, all.slice(5)).part).toBe('whole lot');
  });

  it('is nothing to speak of in a lot of a few metres, and on a line has two ends only', () => {
    const few = [0, 1, 2].map((i) => ({ easting: i, northing: 0 }));
    expect(whereabouts(few, [2])).toEqual({ part: null, strays: [2] });
    const line = [0, 1, 2, 3].map((i) => ({ easting: 0, northing: 30 * i }));
    expect(whereabouts(line, [3]).part).toBe('north side');
    expect(whereabouts(line, []).part).toBeNull();
  });

  it('turns with the lot', () => {
    const turned = LOT.map(({ easting, northing }) => ({ easting: -northing, northing: easting }));
    const quarter = { north: 'west', west: 'south', south: 'east', east: 'north' } as const;
    const choice = fc.uniqueArray(fc.integer({ min: 0, max: 48 }), { minLength: 1, maxLength: 6 });
    fc.assert(
      fc.property(choice, (some) => {
        const { part } = whereabouts(LOT, some);
        const words = part?.split(/[- ]/) ?? [];
        const expected = words.map((word) => (word in quarter ? quarter[word as 'north'] : word)).sort();
        expect((whereabouts(turned, some).part?.split(/[- ]/) ?? []).sort()).toEqual(expected);
      }),
      { numRuns: 2000, examples: [[[3, 35, 0, 1, 7]]] },
    );
  });
});

describe('a lot that lies off by its layer’s offset', () => {
  const tolerance = { below: 0.03, above: 0.015 };
  const lot = (...shifts: number[]) => shifts.flatMap((shift) => [shift - 0.01, shift, shift + 0.01]);

  it('shows by how much, either way', () => {
    expect(shiftByOffset(lot(0.15), -0.15, tolerance)).toBe(0.15);
    expect(shiftByOffset(lot(-0.15), -0.15, tolerance)).toBe(-0.15);
    expect(shiftByOffset(lot(0.165), -0.15, tolerance)).toBe(0.15);
    expect(shiftByOffset(lot(0.17), -0.15, tolerance)).toBeNull();
    expect(shiftByOffset(lot(0), -0.15, tolerance)).toBeNull();
    expect(shiftByOffset([], -0.15, tolerance)).toBeNull();
  });

  it('is not told from one that is just high where the offset is small', () => {
    expect(shiftByOffset(lot(0.06), -0.06, tolerance)).toBeNull();
    expect(shiftByOffset(lot(0.061), -0.061, tolerance)).toBe(0.061);
  });

  it('is not made of two heaps whose mean happens to lie there', () => {
    expect(shiftByOffset(lot(0, 0.3), -0.15, tolerance)).toBeNull();
  });
});
