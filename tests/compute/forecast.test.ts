import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  type ForecastTask,
  type FullForecast,
  forecastInFull,
  forecastSetup,
} from '@/lib/compute/survey/forecast';
import type { ControlMark } from '@/lib/compute/survey/shots';
import { fitStation, type StationFit } from '@/lib/compute/survey/stationFit';
import { type Chance, NO_ERRORS, seededChance } from '@/tests/simulator/chance';
import { type Face, type Instrument, observe, type Programme, type Site } from '@/tests/simulator/observe';
import { type Kind, randomInstrument, randomSite } from '@/tests/simulator/randomSite';
import { asEngine } from './asEngine';

const LIMITS = {
  residual: { horizontal: 0.01, vertical: 0.01 },
  work: { radius: 150, horizontal: 0.03, vertical: 0.015 },
  checkRequired: true,
};
const BOTH: Face[] = ['left', 'right'];

interface Ground {
  site: Site;
  instrument: Instrument;
  programme: Programme;
}

/** A random site whose reflectors all stand at one height, as a forecast has them. */
function ground(seed: number, kind: Kind = {}, programme: Programme = { faces: BOTH, sets: 1 }): Ground {
  const chance = seededChance(seed);
  const site = randomSite(chance, kind);
  const marks = site.marks.map((mark) => ({ ...mark, reflectors: [1.2] }));
  return { site: { ...site, marks }, instrument: randomInstrument(chance), programme };
}

const engineOf = ({ site, instrument, programme }: Ground, chance: Chance = NO_ERRORS) =>
  asEngine(observe(site, instrument, programme, chance));

/** The forecast for the very place, control and instrument of a site. */
function taskOf(of: Ground, targets?: readonly ControlMark[]): ForecastTask {
  const { control, accuracy, surroundings } = engineOf(of);
  return {
    targets: targets ?? [...control.values()],
    plan: {
      faces: of.programme.faces,
      sets: of.programme.sets,
      kinds: ['direction', 'zenith', 'distance'],
      targetHeight: 1.2,
    },
    sight: { shortest: 2, longest: 1000 },
    accuracy,
    surroundings,
    atmosphereKnown: of.site.ppmSigma === 0,
    limits: LIMITS,
  };
}

const placeOf = ({ site: { station } }: Ground) => ({
  easting: station.easting,
  northing: station.northing,
  axis: station.height,
});

function forecastOf(of: Ground, targets?: readonly ControlMark[]): FullForecast {
  const forecast = forecastInFull(placeOf(of), taskOf(of, targets));
  if ('code' in forecast) throw new Error(forecast.code);
  return forecast;
}

/** Variances that no orientation of the circle changes: easting, northing, axis, orientation. */
const variances = ({ station }: StationFit) => [0, 6, 12, 18].map((i) => station.covariance[i]);

function near(values: readonly number[], expected: readonly number[], relative: number) {
  expect(values).toHaveLength(expected.length);
  for (const [i, value] of values.entries())
    expect(Math.abs(value - expected[i])).toBeLessThanOrEqual(relative * Math.abs(expected[i]));
}

const anySeed = fc.integer({ min: 1, max: 1_000_000 });
const anyProgramme = fc.record({
  faces: fc.constantFrom<Face[][]>(['left'], BOTH),
  sets: fc.integer({ min: 1, max: 3 }),
});
const anyKind = fc.record({
  unknownAirPpm: fc.constantFrom(undefined, undefined, 10),
  withoutElevation: fc.constantFrom(0, 0, 1),
  combinedFactor: fc.constantFrom(1, 0.9996),
});

describe('a setup forecast', () => {
  it('is the fit of simulated shots from that place, in every figure that does not need their errors', () => {
    fc.assert(
      fc.property(anySeed, anyKind, anyProgramme, (seed, kind, programme) => {
        const of = ground(seed, kind, programme);
        const { fit } = forecastOf(of);
        const real = fitStation(engineOf(of));
        // How high a mark without an elevation stands, the forecast cannot know; it matters to second order.
        if (kind.withoutElevation > 0) return near(variances(fit), variances(real), 0.02);
        near(variances(fit), variances(real), 1e-6);
        near(
          [fit.ellipse95.semiMajor, fit.ellipse95.semiMinor],
          [real.ellipse95.semiMajor, real.ellipse95.semiMinor],
          1e-6,
        );
        expect(fit.geometry.inside).toBe(real.geometry.inside);
        expect(fit.heightDetermined).toBe(real.heightDetermined);
        const detectable = ({ marks }: StationFit) =>
          marks.flatMap(({ readings }) =>
            readings.flatMap(({ redundancy, minimalDetectable }) =>
              redundancy > 1e-4 ? [redundancy, minimalDetectable] : [],
            ),
          );
        near(detectable(fit), detectable(real), 1e-5);
      }),
      { numRuns: 60, seed: 3 },
    );
  });

  it('is the fit of directions and zenith angles alone, where no distances are to be read', () => {
    fc.assert(
      fc.property(anySeed, (seed) => {
        const of = ground(seed, { marks: [4, 6], allRound: true });
        const task = taskOf(of);
        const plan = { ...task.plan, kinds: ['direction', 'zenith'] as const };
        const forecast = forecastSetup(placeOf(of), { ...task, plan });
        const input = engineOf(of);
        const shots = input.shots.map((shot) => ({ ...shot, distance: null }));
        if ('code' in forecast) return expect(() => fitStation({ ...input, shots })).toThrow(forecast.code);
        near(variances(forecast.fit), variances(fitStation({ ...input, shots })), 1e-5);
        expect(forecast.fit.ellipse95.semiMajor).toBeGreaterThan(forecastOf(of).fit.ellipse95.semiMajor);
      }),
      { numRuns: 40, seed: 17 },
    );
  });

  it('is within a few per mille of the fit of shots with all their errors', () => {
    fc.assert(
      fc.property(anySeed, anyProgramme, (seed, programme) => {
        const of = ground(seed, { allRound: true }, programme);
        const noisy = fitStation(engineOf(of, seededChance(seed + 1)));
        const unscaled = variances(noisy).map((variance) => variance / noisy.scale ** 2);
        near(variances(forecastOf(of).fit), unscaled, 5e-3);
      }),
      { numRuns: 40, seed: 5 },
    );
  });

  it('never has a larger ellipse, height or orientation error with a target more', () => {
    fc.assert(
      fc.property(anySeed, fc.constantFrom<Face[][]>(['left'], BOTH), (seed, faces) => {
        const of = ground(seed, { marks: [4, 8] }, { faces, sets: 1 });
        const targets = taskOf(of).targets;
        for (let count = 3; count < targets.length; count++) {
          const [fewer, more] = [targets.slice(0, count), targets.slice(0, count + 1)].map(
            (some) => forecastOf(of, some).fit,
          );
          expect(more.ellipse95.semiMajor).toBeLessThanOrEqual(fewer.ellipse95.semiMajor * (1 + 1e-9));
          expect(more.ellipse95.semiMinor).toBeLessThanOrEqual(fewer.ellipse95.semiMinor * (1 + 1e-9));
          for (const [i, variance] of variances(more).entries())
            expect(variance).toBeLessThanOrEqual(variances(fewer)[i] * (1 + 1e-9));
        }
      }),
      { numRuns: 60, seed: 11 },
    );
  });

  it('turns with the site: the ellipse follows, its size does not change', () => {
    fc.assert(
      fc.property(anySeed, fc.double({ min: 0, max: 2 * Math.PI, noNaN: true }), (seed, angle) => {
        const of = ground(seed);
        const { station, marks } = of.site;
        const [s, c] = [Math.sin(angle), Math.cos(angle)];
        const turned = marks.map((mark) => {
          const [east, north] = [mark.easting - station.easting, mark.northing - station.northing];
          return {
            ...mark,
            easting: station.easting + c * east + s * north,
            northing: station.northing + c * north - s * east,
          };
        });
        const { ellipse95 } = forecastOf(of).fit;
        const other = forecastOf({ ...of, site: { ...of.site, marks: turned } }).fit.ellipse95;
        near([other.semiMajor, other.semiMinor], [ellipse95.semiMajor, ellipse95.semiMinor], 1e-7);
        if (ellipse95.semiMajor > 1.01 * ellipse95.semiMinor)
          expect(Math.abs(Math.sin(other.azimuth - ellipse95.azimuth - angle))).toBeLessThan(1e-5);
      }),
      { numRuns: 40, seed: 13 },
    );
  });

  it.each([
    [BOTH, undefined],
    [['left'] as Face[], undefined],
    [BOTH, 10],
  ])(
    'tells how far the station moves without a mark, and what residuals show: 95 of 100 simulated setups (%s, %s ppm)',
    (faces, unknownAirPpm) => {
      const of = ground(41, { marks: [4, 4], unknownAirPpm }, { faces, sets: 1 });
      const { fit, residuals } = forecastOf(of);
      const chance = seededChance(77);
      const RUNS = 1500;
      const rounds = Array.from({ length: RUNS }, () => fitStation(engineOf(of, chance)));
      for (const [i, { name, without }] of fit.marks.entries()) {
        const own = rounds.map(({ marks }) => marks.find((mark) => mark.name === name)!);
        const share = (hit: (mark: (typeof own)[number]) => boolean) => own.filter(hit).length / RUNS;
        // Four standard deviations of a count about 0.95 of 1500 are 0.023; the major axis bounds from above.
        const shorter = share((mark) => mark.without!.horizontal <= without!.horizontal);
        expect(shorter).toBeGreaterThan(0.95 - 0.023);
        expect(shorter).toBeLessThan(1);
        const lower = share((mark) => Math.abs(mark.without!.vertical!) <= without!.vertical!);
        expect(Math.abs(lower - 0.95)).toBeLessThan(0.023);
        const { horizontal, vertical } = residuals[i]!;
        const within = share(
          ({ residual }) => Math.hypot(residual.easting!, residual.northing!) <= horizontal,
        );
        expect(within).toBeGreaterThan(0.95 - 0.023);
        expect(within).toBeLessThan(1);
        const level = share(({ residual }) => Math.abs(residual.elevation!) <= vertical!);
        expect(Math.abs(level - 0.95)).toBeLessThan(0.023);
      }
    },
  );

  it('counts hidden blunders as the fit would let them in', () => {
    const of = ground(19, { marks: [5, 5], allRound: true });
    const { blunders } = forecastOf(of);
    const input = engineOf(of);
    const clean = fitStation(input).station;
    for (const { target, kind, size } of blunders.largest) {
      const shots = input.shots.map((shot) => {
        if (shot.target !== target) return shot;
        if (kind === 'distance')
          return {
            ...shot,
            distance: { ...shot.distance!, slopeDistance: shot.distance!.slopeDistance + size! },
          };
        if (kind === 'direction') return { ...shot, direction: shot.direction! + size! };
        return { ...shot, zenith: shot.zenith! + (shot.face === 'left' ? size! : -size!) };
      });
      const { station, marks } = fitStation({ ...input, shots });
      const moved = Math.hypot(station.easting - clean.easting, station.northing - clean.northing);
      expect(moved).toBeLessThan(blunders.undetected.horizontal! * 1.01);
      expect(Math.abs(station.axis - clean.axis)).toBeLessThan(blunders.undetected.vertical! * 1.01);
      // The reading's own w is then δ₀.
      const reading = marks
        .find(({ name }) => name === target)!
        .readings.find((candidate) => candidate.kind === kind)!;
      expect(Math.abs(reading.standardised)).toBeGreaterThan(4.0);
      expect(Math.abs(reading.standardised)).toBeLessThan(4.26);
    }
  });

  it('says of the geometry what the class says, and nothing of a check', () => {
    const around = forecastOf(ground(23, { marks: [6, 6], allRound: true }));
    expect(around.verdict.reasons.map(({ code }) => code)).not.toContain('check_wanted');
    const few = forecastOf(
      ground(29, { marks: [3, 3] }),
      taskOf(ground(29, { marks: [3, 3] })).targets.slice(0, 2),
    );
    expect(few.verdict.verdicts.horizontal).toBe('hold');
    expect(few.verdict.reasons[0]).toMatchObject({ code: 'too_few_marks', count: 2 });
    expect(few.blunders.undetected.horizontal).toBeGreaterThan(around.blunders.undetected.horizontal!);
  });

  it('makes no station where fewer than two marks are in range, and leaves out what is too near', () => {
    const of = ground(31, { marks: [5, 5] });
    const task = taskOf(of);
    expect(forecastSetup(placeOf(of), { ...task, sight: { shortest: 2, longest: 3 } })).toEqual({
      code: 'too_few_sights',
    });
    const [mark, ...others] = task.targets;
    const onMark = { easting: mark.easting, northing: mark.northing, axis: placeOf(of).axis };
    const there = forecastSetup(onMark, task) as FullForecast;
    expect(there.fit.marks.map(({ name }) => name)).toEqual(others.map(({ name }) => name));
  });
});
