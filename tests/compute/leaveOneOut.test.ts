import { describe, expect, it } from 'vitest';
import { StationError } from '@/lib/compute/survey/stationAdjustment';
import { fitStation } from '@/lib/compute/survey/stationFit';
import { seededChance } from '@/tests/simulator/chance';
import { observe } from '@/tests/simulator/observe';
import { randomInstrument, randomSite } from '@/tests/simulator/randomSite';
import { asEngine } from './asEngine';

describe('the setup with each mark left out', () => {
  it.each([
    ['as observed', 0],
    ['with a mark half a metre off', 0.5],
    ['with a mark five metres off', 5],
  ])('moves as a real fit without that mark does, %s', (_, off) => {
    const chance = seededChance(41);
    for (let i = 0; i < 150; i++) {
      const plain = off > 1;
      const kind = {
        secondReflector: !plain && i % 3 === 1,
        withoutElevation: !plain && i % 3 === 2 ? 1 : 0,
      };
      const faces = plain || i % 2 === 0 ? (['left', 'right'] as const) : (['left'] as const);
      const site = randomSite(chance, kind);
      const observed = observe(site, randomInstrument(chance), { faces: [...faces], sets: 1 }, chance);
      observed.published[1].northing += off;
      const input = asEngine(observed);
      const fit = fitStation(input);
      for (const { name, without } of fit.marks) {
        const rest = fitStation({ ...input, shots: input.shots.filter((shot) => shot.target !== name) });
        const horizontal = Math.hypot(
          rest.station.easting - fit.station.easting,
          rest.station.northing - fit.station.northing,
        );
        const vertical = rest.station.axis - fit.station.axis;
        // One linear step from the whole fit leaves a small part of the shift, as residuals are large or small.
        const tolerance = 1e-5 + (off === 0 ? 1e-4 : 1e-2) * Math.hypot(horizontal, vertical);
        expect(Math.abs(without!.horizontal - horizontal)).toBeLessThan(tolerance);
        expect(Math.abs(without!.vertical! - vertical)).toBeLessThan(tolerance);
      }
    }
  });

  it('is not called undetermined for a gross error: the station moves, and far', () => {
    const chance = seededChance(44);
    for (let i = 0; i < 150; i++) {
      const site = randomSite(chance);
      const observed = observe(site, randomInstrument(chance), { faces: ['left'], sets: 1 }, chance);
      observed.published[1].northing += 5;
      const fit = fitStation(asEngine(observed));
      const shifts = fit.marks.map(({ without }) => without?.horizontal ?? null);
      expect(shifts).not.toContain(null);
      expect(Math.max(...shifts.map(Number))).toBeGreaterThan(0.1);
    }
  });

  it('is undetermined without one of two marks', () => {
    const { site, input } = twoMarks();
    const fit = fitStation(input);
    expect(site.marks).toHaveLength(2);
    expect(fit.marks.map(({ without }) => without)).toEqual([null, null]);
  });

  it('has no height without the only mark that carries it', () => {
    const chance = seededChance(43);
    for (let i = 0; i < 50; i++) {
      const count = 6;
      const site = randomSite(chance, { withoutElevation: count - 1 });
      site.marks.forEach((mark, m) => {
        mark.hasElevation = m === 0;
      });
      const observed = observe(site, randomInstrument(chance), { faces: ['left', 'right'], sets: 1 }, chance);
      const fit = fitStation(asEngine(observed));
      expect(fit.heightDetermined).toBe(true);
      for (const { name, without } of fit.marks) {
        if (name === 'M1') expect(without).toMatchObject({ vertical: null });
        else expect(without!.vertical).toBeCloseTo(0, 1);
      }
    }
  });
});

describe('a setup that cannot be computed', () => {
  it('has one mark only', () => {
    const { input } = twoMarks();
    const shots = input.shots.filter((shot) => shot.target === 'M1');
    expect(() => fitStation({ ...input, shots })).toThrow(new StationError('too_few_sights'));
  });

  it('has two names for one place', () => {
    const { input } = twoMarks();
    input.control.set('M2', { ...input.control.get('M1')!, name: 'M2' });
    const shots = input.shots
      .filter((shot) => shot.target === 'M1')
      .flatMap((shot) => [shot, { ...shot, target: 'M2' }]);
    expect(() => fitStation({ ...input, shots })).toThrow(StationError);
  });

  it('has two marks with directions alone', () => {
    const { input } = twoMarks();
    const shots = input.shots.map((shot) => ({ ...shot, distance: null }));
    expect(() => fitStation({ ...input, shots })).toThrow(new StationError('too_few_sights'));
  });
});

function twoMarks() {
  const chance = seededChance(42);
  const site = randomSite(chance);
  site.marks.splice(2);
  const observed = observe(site, randomInstrument(chance), { faces: ['left', 'right'], sets: 1 }, chance);
  return { site, input: asEngine(observed) };
}
