import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { GREAT_MOVE, greatMove } from '@/lib/compute/survey/controlMove';
import { unitMixUp } from '@/lib/compute/units/mixUp';

// 1 ft = 0.3048 m and 1 U.S. survey foot = 1200/3937 m exactly (24 FR 5348, 1 July 1959).
const FOOT = 0.3048;
const SURVEY_FOOT = 1200 / 3937;

describe('a mix-up of units', () => {
  it('shows by its factor, for either foot', () => {
    for (const foot of [FOOT, SURVEY_FOOT]) {
      expect(unitMixUp([1000 * foot], [1000], 0.5)).toBe('metresAsFeet');
      expect(unitMixUp([1000 / foot], [1000], 0.5)).toBe('feetAsMetres');
    }
    const north = 600_000;
    expect(unitMixUp([(north * SURVEY_FOOT) / FOOT], [north], 1)).toBe('otherFoot');
  });

  it('is none where the rest does not agree, or where nothing disagrees', () => {
    expect(unitMixUp([1000 * FOOT + 0.2], [1000], 0.5)).toBeNull();
    expect(unitMixUp([1000], [1000], 0.5)).toBeNull();
    expect(unitMixUp([0], [0], 0.5)).toBeNull();
    expect(unitMixUp([1000], [1001.5], 1)).toBeNull();
  });

  it('is the same whatever the place', () => {
    const far = fc.double({ min: 100, max: 1e6, noNaN: true });
    fc.assert(
      fc.property(far, far, (easting, northing) => {
        const known = [easting, northing];
        expect(unitMixUp([easting / FOOT, northing / FOOT], known, 1)).toBe('feetAsMetres');
        expect(unitMixUp([easting * FOOT, northing * FOOT], known, 1)).toBe('metresAsFeet');
        expect(unitMixUp([easting + 200, northing - 200], known, 1)).toBeNull();
      }),
    );
  });
});

describe('the move of a control point', () => {
  const before = { easting: 3000, northing: 4000, elevation: 100 };

  it('is none to speak of up to a metre', () => {
    expect(greatMove(before, { ...before, easting: 3000 + GREAT_MOVE })).toBeNull();
    expect(greatMove(before, { ...before, elevation: 101.1 })?.distance).toBeCloseTo(1.1, 9);
    expect(greatMove(before, { ...before, elevation: null })).toBeNull();
  });

  it('is as long as the way between both places, and looks like the units that were mixed up', () => {
    const after = { easting: 3000 / FOOT, northing: 4000 / FOOT, elevation: null };
    const move = greatMove(before, after);
    expect(move?.distance).toBeCloseTo(5000 / FOOT - 5000, 6);
    expect(move?.mixUp).toBe('feetAsMetres');
    expect(greatMove(before, { ...before, easting: 3500 })).toEqual({ distance: 500, mixUp: null });
  });
});
