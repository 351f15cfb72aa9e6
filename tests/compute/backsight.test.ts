import { describe, expect, it } from 'vitest';
import { backsightChecks } from '@/lib/compute/survey/backsights';
import type { CheckDifference } from '@/lib/compute/survey/checkShots';
import type { ControlMark, Shot } from '@/lib/compute/survey/shots';
import { adjustStation, type Occupied, type StationError } from '@/lib/compute/survey/stationAdjustment';
import { fitStation, type StationFit } from '@/lib/compute/survey/stationFit';
import { judgeSetup, type SetupLimits } from '@/lib/compute/survey/verdict';
import { wrapDifference } from '@/lib/compute/units/angles';
import { stationProblem } from '@/lib/services/uploads/stationProblem';
import { type Chance, seededChance } from '@/tests/simulator/chance';
import { type Observed, observe, type Site } from '@/tests/simulator/observe';
import { randomInstrument, randomSite } from '@/tests/simulator/randomSite';
import { asEngine } from './asEngine';

const FACES: ('left' | 'right')[] = ['left', 'right'];
const CENTRING = 0.001;
const LIMITS: SetupLimits = {
  residual: { horizontal: 0.03, vertical: 0.03 },
  work: { radius: 100, horizontal: 0.1, vertical: 0.1 },
  checkRequired: false,
};
const WORK = { horizontal: 0.01, vertical: 0.01 };

/**
 * A setup over a mark: the published place is off by the mark's own error, the instrument by its centring, and the
 * instrument height was read with the error of a measured height.
 */
function over(chance: Chance, backsights: number, faces = FACES) {
  const site = randomSite(chance, { marks: [backsights, backsights] });
  const instrument = randomInstrument(chance);
  const observed = observe(site, instrument, { faces, sets: 1 }, chance);
  const [horizontalSigma, verticalSigma] = [0.003, 0.002];
  const height = 1.4 + 0.3 * chance.uniform();
  const off = () => horizontalSigma * chance.normal() + CENTRING * chance.normal();
  const mark: ControlMark = {
    name: 'STN',
    version: 3,
    easting: site.station.easting + off(),
    northing: site.station.northing + off(),
    elevation: site.station.height - height + verticalSigma * chance.normal(),
    horizontalSigma,
    verticalSigma,
    status: 'trusted',
  };
  const occupied: Occupied = {
    mark,
    instrumentHeight: height + instrument.targetHeight * chance.normal(),
  };
  return { observed, occupied, input: { ...asEngine(observed), occupied } };
}

function misses({ station }: StationFit, { site }: Observed) {
  const [e, n] = [station.easting - site.station.easting, station.northing - site.station.northing];
  const [ee, en, nn] = [station.covariance[0], station.covariance[1], station.covariance[6]];
  const turn = wrapDifference(station.orientation - site.orientation);
  return {
    plan: (nn * e * e - 2 * en * e * n + ee * n * n) / (ee * nn - en * en),
    height: (station.axis - site.station.height) ** 2 / station.covariance[12],
    orientation: turn ** 2 / station.covariance[18],
  };
}

const codesOf = (fit: StationFit, checks: CheckDifference[] = []) =>
  judgeSetup(fit, LIMITS, checks, WORK).reasons.map(({ code }) => code);

describe.each([1, 2, 3])('1,000 simulated setups over a mark with %i backsights', (backsights) => {
  it.each([
    ['both faces', FACES],
    ['one face', FACES.slice(0, 1)],
  ])('%s: what is stated holds in 93–97 %%, and so do the checks of distance and height', (name, faces) => {
    const chance = seededChance(40 + backsights);
    const count = 1000;
    const hits = { plan: 0, height: 0, orientation: 0, test: 0, distance: 0, rise: 0 };
    for (let i = 0; i < count; i++) {
      const { observed, input } = over(chance, backsights, faces);
      const fit = fitStation(input);
      expect(fit.converged).toBe(true);
      const { plan, height, orientation } = misses(fit, observed);
      if (plan <= 5.991) hits.plan++;
      if (height <= 3.841) hits.height++;
      if (orientation <= 3.841) hits.orientation++;
      if (fit.test.passed) hits.test++;
      const [first] = fit.backsights;
      if (Math.abs(first.distance!.difference) <= 1.96 * first.distance!.uncertainty) hits.distance++;
      if (Math.abs(first.height!.difference) <= 1.96 * first.height!.uncertainty) hits.rise++;
    }
    const shares = Object.entries(hits).map(([what, hit]) => `${what} ${((100 * hit) / count).toFixed(1)} %`);
    console.log(`${backsights} backsights, ${name}: ${shares.join(', ')}`);
    for (const hit of Object.values(hits)) {
      expect(hit / count).toBeGreaterThan(0.93);
      expect(hit / count).toBeLessThan(0.97);
    }
  });
});

describe('2,000 simulated backsights on a slope', () => {
  const count = 2000;
  const [grid, rise] = [40, 40];
  const instrument = {
    direction: 5e-6,
    zenith: 5e-5,
    distance: 0.002,
    distancePpm: 0,
    collimation: 5e-5,
    targetCentring: 0.001,
    targetHeight: 0.001,
  };
  it.each([
    ['without a distance', { distance: false, zenith: true, atmosphere: true }, 0.01, 0.003, 'height'],
    ['without a zenith angle', { distance: true, zenith: false, atmosphere: true }, 0.002, 0.01, 'distance'],
    ['in unknown air', { distance: true, zenith: true, atmosphere: false }, 0.001, 0.001, 'height'],
  ] as const)(
    '%s: the comparison scatters as its u says',
    (_, read, horizontalSigma, verticalSigma, what) => {
      const chance = seededChance(53);
      const ppmSigma = read.atmosphere ? 0 : 150;
      let [squares, stated] = [0, 0];
      for (let i = 0; i < count; i++) {
        const station = { easting: 1000, northing: 1000, height: 11.5 };
        const mark = { hasElevation: true, reflectors: [1.6], horizontalSigma, verticalSigma };
        const site: Site = {
          ...randomSite(chance, { marks: [2, 2] }),
          station,
          marks: [
            { ...mark, name: 'M1', easting: 1000 + grid, northing: 1000, height: 10 + rise },
            { ...mark, name: 'M2', easting: 1000, northing: 1100, height: 10 },
          ],
          ppmSigma,
        };
        const observed = observe(site, instrument, { faces: FACES, sets: 1 }, chance);
        const off = () => horizontalSigma * chance.normal() + CENTRING * chance.normal();
        const occupied: Occupied = {
          mark: {
            name: 'STN',
            version: 1,
            easting: station.easting + off(),
            northing: station.northing + off(),
            elevation: 10 + verticalSigma * chance.normal(),
            horizontalSigma,
            verticalSigma,
            status: 'trusted',
          },
          instrumentHeight: 1.5 + instrument.targetHeight * chance.normal(),
        };
        const input = asEngine(observed);
        const shots = input.shots.map(
          (shot): Shot => ({
            ...shot,
            distance: read.distance || shot.target !== 'M1' ? shot.distance : null,
            zenith: read.zenith || shot.target !== 'M1' ? shot.zenith : null,
          }),
        );
        const surroundings = { ...input.surroundings, unknownAtmospherePpm: 150 };
        const ppm = read.atmosphere ? input.ppm : null;
        const adjusted = adjustStation({ ...input, shots, surroundings, ppm, occupied });
        const comparison = backsightChecks(adjusted)[0][what]!;
        squares += comparison.difference ** 2;
        stated += comparison.uncertainty ** 2;
      }
      console.log(
        `rms ${(1000 * Math.sqrt(squares / count)).toFixed(2)} mm, stated u ${(1000 * Math.sqrt(stated / count)).toFixed(2)} mm`,
      );
      expect(Math.sqrt(squares / stated)).toBeGreaterThan(0.95);
      expect(Math.sqrt(squares / stated)).toBeLessThan(1.05);
    },
  );
});

describe('what is proven of a setup over a mark', () => {
  const chance = seededChance(50);
  const agreed = {
    target: 'K',
    inFit: false,
    status: 'trusted',
    horizontal: 'agreed',
    vertical: 'agreed',
  } as CheckDifference;

  it('by one backsight: the line, not its direction; a check on another mark proves it', () => {
    const { input } = over(chance, 1);
    const fit = fitStation(input);
    expect(judgeSetup(fit, LIMITS, [], WORK).verdicts).toEqual({ horizontal: 'hold', vertical: 'pass' });
    expect(codesOf(fit)[0]).toBe('orientation_unproven');
    expect(judgeSetup(fit, LIMITS, [agreed], WORK).verdict).toBe('pass');
    // Drift of a mark of the fit proves nothing, nor does a suspect mark.
    for (const change of [{ inFit: true }, { status: 'suspect' as const }])
      expect(codesOf(fit, [{ ...agreed, ...change }])).toContain('orientation_unproven');
  });

  it('by two and three backsights: everything', () => {
    for (const backsights of [2, 3]) {
      const { input } = over(chance, backsights);
      const { verdict, reasons } = judgeSetup(fitStation(input), LIMITS, [], WORK);
      expect(verdict).toBe('pass');
      expect(reasons[0]).toMatchObject({ code: 'within_limits', marks: backsights + 1 });
    }
  });

  it('by two backsights to one mark: no more than by one', () => {
    const { input } = over(chance, 1);
    const again = input.shots.map((shot): Shot => ({ ...shot, id: `${shot.id}/2`, set: 2 }));
    expect(codesOf(fitStation({ ...input, shots: [...input.shots, ...again] }))).toContain(
      'orientation_unproven',
    );
  });

  it('by suspect marks: nothing', () => {
    const { input, occupied } = over(chance, 2);
    const control = new Map(
      [...input.control].map(([name, mark]): [string, ControlMark] => [name, { ...mark, status: 'suspect' }]),
    );
    expect(codesOf(fitStation({ ...input, control }))).toContain('orientation_unproven');
    const shaky = { ...occupied, mark: { ...occupied.mark, status: 'suspect' as const } };
    expect(codesOf(fitStation({ ...input, occupied: shaky }))).toContain('occupied_suspect');
  });

  it('by a backsight beyond the limit: failed where 2u proves it, and held where it does not', () => {
    const { input } = over(chance, 2);
    const fit = fitStation(input);
    const judged = (difference: number, uncertainty: number) => {
      const [first, ...others] = fit.backsights;
      const height = { ...first.height!, difference, uncertainty };
      return judgeSetup({ ...fit, backsights: [{ ...first, height }, ...others] }, LIMITS, [], WORK);
    };
    const { verdicts, reasons } = judged(-0.045, 0.01);
    expect(verdicts).toEqual({ horizontal: 'pass', vertical: 'hold' });
    expect(reasons).toContainEqual({
      code: 'backsight_unproven',
      axis: 'vertical',
      target: fit.backsights[0].target,
      value: -0.045,
      uncertainty: 0.01,
      limit: 0.03,
    });
    const failed = judged(-0.055, 0.01);
    expect(failed.verdicts.vertical).toBe('fail');
    expect(failed.reasons.map(({ code }) => code)).toContain('backsight_over');
    expect(judged(0.029, 0.02).verdict).toBe('pass');
  });

  it('by a backsight that is published where the instrument stands: nothing, and it is named', () => {
    const { input, occupied } = over(chance, 2);
    const { easting, northing } = occupied.mark;
    const control = new Map(input.control).set('M1', { ...input.control.get('M1')!, easting, northing });
    const refused = (() => {
      try {
        return fitStation({ ...input, control });
      } catch (error) {
        return error;
      }
    })();
    expect(refused).toMatchObject({ name: 'StationError', code: 'marks_at_station', marks: ['M1'] });
    const problems = stationProblem(refused as StationError, '/setups/2', [
      { target: 'M2' },
      { target: 'M1' },
    ]);
    expect(problems).toMatchObject([{ pointer: '/setups/2/shots/1/target', code: 'setup_not_computable' }]);
  });

  it('of the height by the mark alone: not enough', () => {
    const { input } = over(chance, 2);
    const flat = input.shots.map((shot): Shot => ({ ...shot, zenith: null }));
    const fit = fitStation({ ...input, shots: flat });
    expect(fit.heightDetermined).toBe(true);
    expect(judgeSetup(fit, LIMITS, [], WORK).verdicts.vertical).toBe('hold');
    expect(codesOf(fit)).toContain('too_few_marks');
    expect(judgeSetup(fit, LIMITS, [agreed], WORK).verdict).toBe('pass');
  });

  it('of the place by directions alone to two marks: not that the instrument stands over its own', () => {
    const { input } = over(chance, 2);
    const shots = input.shots.map((shot): Shot => ({ ...shot, distance: null }));
    const fit = fitStation({ ...input, shots });
    expect(fit.backsights.map(({ distance }) => distance)).toEqual([null, null]);
    expect(codesOf(fit)).toContain('occupied_unproven');
  });
});

describe('200 setups over a mark with one thing wrong', () => {
  it.each([
    ['a backsight that carries another mark’s name', 2, 'misnamed'],
    ['a backsight moved sideways by 0.15 m', 2, 'sideways'],
    ['an instrument over another mark, 5 m aside', 2, 'elsewhere'],
    ['an instrument height wrong by 0.1 m', 2, 'height'],
    ['a wrong prism constant of 0.1 m', 1, 'prism'],
  ] as const)('%s: no setup passes', (_, backsights, fault) => {
    const chance = seededChance(51);
    for (let i = 0; i < 200; i++) {
      const { input, occupied, observed } = over(chance, backsights);
      const control = new Map(input.control);
      const change = (name: string, east: number, north: number) => {
        const mark = control.get(name)!;
        control.set(name, { ...mark, easting: mark.easting + east, northing: mark.northing + north });
      };
      const { station, marks } = observed.site;
      const azimuth = Math.atan2(marks[0].easting - station.easting, marks[0].northing - station.northing);
      let { shots } = input;
      let stood = occupied;
      if (fault === 'misnamed') change('M1', 40, -30);
      if (fault === 'sideways') change('M1', 0.15 * Math.cos(azimuth), -0.15 * Math.sin(azimuth));
      if (fault === 'elsewhere')
        stood = { ...occupied, mark: { ...occupied.mark, easting: occupied.mark.easting + 5 } };
      if (fault === 'height') stood = { ...occupied, instrumentHeight: occupied.instrumentHeight + 0.1 };
      if (fault === 'prism') {
        shots = shots.map((shot) => ({
          ...shot,
          distance: { ...shot.distance!, slopeDistance: shot.distance!.slopeDistance + 0.1 },
        }));
      }
      const fit = fitStation({ ...input, shots, control, occupied: stood });
      expect(judgeSetup(fit, LIMITS, [], WORK).verdict).toBe('fail');
      if (fault === 'height') {
        expect(fit.explanations.map((one) => one.fault)).toContain('instrumentHeight');
        expect(fit.backsights.every(({ height }) => Math.abs(height!.difference - 0.1) < 0.03)).toBe(true);
      }
    }
  });

  it('one backsight moved sideways alone is never failed, and never passed', () => {
    const chance = seededChance(52);
    for (let i = 0; i < 100; i++) {
      const { input, observed } = over(chance, 1);
      const { station, marks } = observed.site;
      const azimuth = Math.atan2(marks[0].easting - station.easting, marks[0].northing - station.northing);
      const mark = input.control.get('M1')!;
      const control = new Map([
        [
          'M1',
          {
            ...mark,
            easting: mark.easting + 0.15 * Math.cos(azimuth),
            northing: mark.northing - 0.15 * Math.sin(azimuth),
          },
        ],
      ]);
      expect(judgeSetup(fitStation({ ...input, control }), LIMITS, [], WORK).verdict).toBe('hold');
    }
  });
});
