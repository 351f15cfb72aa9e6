import { describe, expect, it } from 'vitest';
import { ELLIPSE_95, NORMAL_95 } from '@/lib/compute/statistics/distributions';
import { type CheckDifference, checkDifferences, outcome } from '@/lib/compute/survey/checkShots';
import type { Shot } from '@/lib/compute/survey/shots';
import { fitStation, type StationFit } from '@/lib/compute/survey/stationFit';
import { type Chance, NO_ERRORS, seededChance } from '@/tests/simulator/chance';
import { type Face, type Observed, observe, type Pointing } from '@/tests/simulator/observe';
import { randomInstrument, randomSite } from '@/tests/simulator/randomSite';
import { STATED } from './arbitrarySite';
import { asEngine, asShot } from './asEngine';

const EPSILON = 1e-12;

describe('a check', () => {
  it.each([
    ['agrees at the tolerance, at 2u, and with 2u at the tolerance', 0.01, 0.005, 0.01, 'agreed'],
    ['is over just beyond the tolerance', 0.01 + EPSILON, 0.005, 0.01, 'over'],
    ['is over beyond the tolerance, whatever its uncertainty', 0.011, 1, 0.01, 'over'],
    ['could not tell with 2u just beyond the tolerance', 0, 0.005 + EPSILON, 0.01, 'notCapable'],
    ['agrees at 2u', 0.006, 0.003, 0.01, 'agreed'],
    ['disagrees just beyond 2u, though within the tolerance', 0.006 + EPSILON, 0.003, 0.01, 'disagrees'],
  ])('%s', (_, difference, uncertainty, tolerance, expected) => {
    expect(outcome(difference, uncertainty, tolerance)).toBe(expected);
    expect(outcome(-difference, uncertainty, tolerance)).toBe(expected);
  });
});

type Pick = (pointing: Pointing) => boolean;

/** Fits an observed setup with some pointings and checks it with the others. */
function fitAndCheck(observed: Observed, isCheck: Pick, change: (shot: Shot) => Shot = (shot) => shot) {
  const input = asEngine(observed);
  const { site, pointings } = observed;
  const orient = pointings.filter((p) => !isCheck(p)).map((p) => asShot(p, site));
  const fit = fitStation({ ...input, shots: orient });
  const checks = pointings.filter(isCheck).map((p) => change(asShot(p, site, 'check')));
  return { fit, differences: differencesOf(fit, checks, input) };
}

function differencesOf(
  fit: StationFit,
  shots: Shot[],
  input: ReturnType<typeof asEngine>,
): CheckDifference[] {
  return checkDifferences({
    ...input,
    shots,
    station: fit.station,
    heightDetermined: fit.heightDetermined,
    scale: fit.scale,
    crossCovariance: new Map(fit.marks.map((mark) => [mark.name, mark.stationCovariance])),
    tolerance: { horizontal: 0.01, vertical: 0.01 },
  });
}

const onFirst: Pick = ({ target }) => target === 'M1';
/** The reflector was put on the mark again, at another height. */
const onFirstAgain: Pick = ({ target, reflector }) => target === 'M1' && reflector === 1;

function simulated(chance: Chance, faces: Face[], again: boolean): Observed {
  const site = randomSite(chance);
  const marks = site.marks.map((mark, i) =>
    i === 0 && again ? { ...mark, reflectors: [...mark.reflectors, 2.5] } : mark,
  );
  return observe({ ...site, marks }, randomInstrument(chance), { faces, sets: 1 }, chance);
}

describe('the stated uncertainty of 2,000 simulated checks', () => {
  it.each<[string, Face[], boolean, number]>([
    ['on a mark outside the fit, both faces', ['left', 'right'], false, 0.97],
    ['on a mark of the fit, both faces', ['left', 'right'], true, 0.97],
    // A single face counts its collimation in the station and again in the check: never too small, often too large.
    ['on a mark outside the fit, one face', ['left'], false, 0.99],
    ['on a mark of the fit, one face', ['left'], true, 0.99],
  ])('covers their difference: %s', (_, faces, again, most) => {
    const chance = seededChance(31);
    let vertical = 0;
    let horizontal = 0;
    for (let i = 0; i < 2000; i++) {
      const { differences } = fitAndCheck(simulated(chance, faces, again), again ? onFirstAgain : onFirst);
      const [{ difference, uncertainty, inFit }] = differences;
      expect(inFit).toBe(again);
      expect(uncertainty.horizontal).toBeGreaterThan(0);
      if (Math.abs(difference.elevation!) <= NORMAL_95 * uncertainty.vertical!) vertical++;
      if (Math.hypot(difference.easting, difference.northing) <= ELLIPSE_95 * uncertainty.horizontal) {
        horizontal++;
      }
    }
    expect(vertical / 2000).toBeGreaterThanOrEqual(0.93);
    expect(vertical / 2000).toBeLessThanOrEqual(most);
    // The worst direction stands for all.
    expect(horizontal / 2000).toBeGreaterThanOrEqual(0.93);
  });
});

describe('check differences', () => {
  const observed = (withoutElevation = 0) =>
    observe(
      randomSite(seededChance(3), { withoutElevation }),
      STATED,
      { faces: ['left', 'right'], sets: 1 },
      NO_ERRORS,
    );

  it('are the polar position minus the published coordinates', () => {
    const { differences } = fitAndCheck(observed(), onFirst, (shot) => ({
      ...shot,
      targetHeight: shot.targetHeight - 0.02,
    }));
    expect(differences).toHaveLength(1);
    expect(differences[0]).toMatchObject({ target: 'M1', inFit: false, status: 'trusted' });
    expect(differences[0].difference.easting).toBeCloseTo(0, 6);
    expect(differences[0].difference.northing).toBeCloseTo(0, 6);
    expect(differences[0].difference.elevation).toBeCloseTo(0.02, 6);
    expect(differences[0].vertical).toBe('over');
  });

  it('have no height on a mark without elevation, nor from a setup without height', () => {
    const withoutMark = fitAndCheck(observed(1), onFirst).differences[0];
    expect(withoutMark).toMatchObject({ vertical: null, uncertainty: { vertical: null } });
    expect(withoutMark.difference.elevation).toBeNull();

    const flat = observed();
    const { fit, differences } = fitAndCheck(
      {
        ...flat,
        published: flat.published.map((mark, i) => (i === 0 ? mark : { ...mark, elevation: null })),
      },
      onFirst,
    );
    expect(fit.heightDetermined).toBe(false);
    expect(differences[0]).toMatchObject({ vertical: null, difference: { elevation: null } });
    expect(differences[0].difference.easting).toBeCloseTo(0, 6);
  });

  it('keep an uncertainty where the scatter of the fit was scaled up', () => {
    const chance = seededChance(5);
    for (let i = 0; i < 50; i++) {
      const bumped = simulated(chance, ['left', 'right'], false);
      for (const mark of bumped.published) mark.easting += 0.1 * chance.normal();
      for (const mark of bumped.published) mark.elevation! += 0.1 * chance.normal();
      const input = asEngine(bumped);
      const fit = fitStation(input);
      expect(fit.scale).toBeGreaterThan(1);
      for (const { uncertainty } of differencesOf(fit, input.shots, input)) {
        expect(uncertainty.horizontal).toBeGreaterThan(0);
        expect(uncertainty.vertical).toBeGreaterThan(0);
      }
    }
  });

  it('need a direction, a zenith angle and a distance', () => {
    for (const part of ['direction', 'zenith', 'distance'] as const) {
      expect(fitAndCheck(observed(), onFirst, (shot) => ({ ...shot, [part]: null })).differences).toEqual([]);
    }
  });
});
