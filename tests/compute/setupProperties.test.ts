import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { fitStation, type StationFit } from '@/lib/compute/survey/stationFit';
import { wrapDifference, wrapTurn } from '@/lib/compute/units/angles';
import { computeSetup } from '@/lib/services/setups/compute';
import { seededChance } from '@/tests/simulator/chance';
import { observe } from '@/tests/simulator/observe';
import { randomInstrument, randomSite } from '@/tests/simulator/randomSite';
import { anyProgramme } from './arbitrarySite';
import { asEngine } from './asEngine';

type Input = ReturnType<typeof asEngine>;

/** An observed setup of any kind, with all its errors. */
const anySetup: fc.Arbitrary<Input> = fc
  .record({
    seed: fc.integer({ min: 1, max: 1_000_000 }),
    programme: anyProgramme,
    secondReflector: fc.boolean(),
    withoutElevation: fc.constantFrom(0, 0, 1),
    unknownAirPpm: fc.constantFrom(undefined, undefined, 10),
  })
  .map(({ seed, programme, ...kind }) => {
    const chance = seededChance(seed);
    return asEngine(observe(randomSite(chance, kind), randomInstrument(chance), programme, chance));
  });

const RUNS = { numRuns: 100, seed: 7 };

/** What no change of frame changes. */
function sameStatistics(fit: StationFit, other: StationFit) {
  expect(other.converged).toBe(true);
  expect(other.test.degreesOfFreedom).toBe(fit.test.degreesOfFreedom);
  expect(other.test.value).toBeCloseTo(fit.test.value, 6);
  expect(other.geometry.inside).toBe(fit.geometry.inside);
  expect(other.geometry.spread).toBeCloseTo(fit.geometry.spread, 6);
  const statistics = ({ marks }: StationFit) =>
    marks.flatMap(({ readings }) =>
      readings.flatMap(({ standardised, redundancy }) => [standardised, redundancy]),
    );
  const own = statistics(fit);
  expect(Math.max(...statistics(other).map((figure, i) => Math.abs(figure - own[i])))).toBeLessThan(1e-6);
}

function near(value: number, expected: number, tolerance: number) {
  expect(Math.abs(value - expected)).toBeLessThan(tolerance);
}

function changeMarks(
  input: Input,
  change: (mark: { easting: number; northing: number; elevation: number }) => object,
) {
  const control = new Map(
    [...input.control].map(([name, mark]) => {
      const moved = { ...mark, ...change({ ...mark, elevation: mark.elevation ?? 0 }) };
      return [name, mark.elevation === null ? { ...moved, elevation: null } : moved] as const;
    }),
  );
  return { ...input, control };
}

describe('a fitted setup', () => {
  it('shifts with its control', () => {
    const metres = fc.double({ min: -5000, max: 5000, noNaN: true });
    fc.assert(
      fc.property(anySetup, metres, metres, metres, (input, east, north, up) => {
        const fit = fitStation(input);
        const shifted = fitStation(
          changeMarks(input, ({ easting, northing, elevation }) => ({
            easting: easting + east,
            northing: northing + north,
            elevation: elevation + up,
          })),
        );
        near(shifted.station.easting, fit.station.easting + east, 1e-7);
        near(shifted.station.northing, fit.station.northing + north, 1e-7);
        near(shifted.station.axis, fit.station.axis + up, 1e-7);
        near(wrapDifference(shifted.station.orientation - fit.station.orientation), 0, 1e-10);
        sameStatistics(fit, shifted);
      }),
      RUNS,
    );
  });

  it('turns with its control, ellipse and all', () => {
    fc.assert(
      fc.property(anySetup, fc.double({ min: 0, max: 6.28, noNaN: true }), (input, angle) => {
        // About a place near by, so that the turn itself costs no digits.
        const [first] = input.control.values();
        const origin = { easting: Math.round(first.easting), northing: Math.round(first.northing) };
        const turned = ({ easting, northing }: { easting: number; northing: number }) => {
          const [e, n] = [easting - origin.easting, northing - origin.northing];
          return {
            easting: origin.easting + e * Math.cos(angle) + n * Math.sin(angle),
            northing: origin.northing + n * Math.cos(angle) - e * Math.sin(angle),
          };
        };
        const fit = fitStation(input);
        const other = fitStation(changeMarks(input, turned));
        const expected = turned(fit.station);
        near(other.station.easting, expected.easting, 1e-7);
        near(other.station.northing, expected.northing, 1e-7);
        near(other.station.axis, fit.station.axis, 1e-7);
        near(wrapDifference(other.station.orientation - fit.station.orientation - angle), 0, 1e-10);
        near(other.ellipse95.semiMajor, fit.ellipse95.semiMajor, 1e-9);
        near(other.ellipse95.semiMinor, fit.ellipse95.semiMinor, 1e-9);
        if (fit.ellipse95.semiMajor > 1.01 * fit.ellipse95.semiMinor) {
          near(Math.sin(other.ellipse95.azimuth - fit.ellipse95.azimuth - angle), 0, 1e-5);
        }
        sameStatistics(fit, other);
      }),
      RUNS,
    );
  });

  it('does not depend on where the circle’s zero lies', () => {
    fc.assert(
      fc.property(anySetup, fc.double({ min: 0, max: 6.28, noNaN: true }), (input, angle) => {
        const fit = fitStation(input);
        const shots = input.shots.map((shot) => ({ ...shot, direction: wrapTurn(shot.direction! + angle) }));
        const other = fitStation({ ...input, shots });
        near(other.station.easting, fit.station.easting, 1e-8);
        near(other.station.northing, fit.station.northing, 1e-8);
        near(wrapDifference(other.station.orientation + angle - fit.station.orientation), 0, 1e-10);
        sameStatistics(fit, other);
      }),
      RUNS,
    );
  });

  it('does not depend on the order of its shots', () => {
    const shuffled = anySetup.chain((input) =>
      fc.shuffledSubarray(input.shots, { minLength: input.shots.length }).map((shots) => ({ input, shots })),
    );
    fc.assert(
      fc.property(shuffled, ({ input, shots }) => {
        const fit = fitStation(input);
        const other = fitStation({ ...input, shots });
        near(other.station.easting, fit.station.easting, 1e-8);
        near(other.station.northing, fit.station.northing, 1e-8);
        near(other.station.axis, fit.station.axis, 1e-8);
        near(other.test.value, fit.test.value, 1e-6);
        for (const mark of fit.marks) {
          const same = other.marks.find(({ name }) => name === mark.name)!;
          near(same.residual.easting!, mark.residual.easting!, 1e-8);
          near(same.without!.horizontal, mark.without!.horizontal, 1e-6);
        }
      }),
      RUNS,
    );
  });

  it('does not depend on the names of its marks', () => {
    fc.assert(
      fc.property(anySetup, (input) => {
        const renamed = (name: string) => `Z${9 - Number(name.slice(1))}`;
        const control = new Map(
          [...input.control].map(([name, mark]) => [renamed(name), { ...mark, name: renamed(name) }]),
        );
        const shots = input.shots.map((shot) => ({ ...shot, target: renamed(shot.target) }));
        const fit = fitStation(input);
        const other = fitStation({ ...input, shots, control });
        expect(other.station).toEqual(fit.station);
        expect(other.marks.map(({ name }) => name)).toEqual(fit.marks.map(({ name }) => renamed(name)));
      }),
      RUNS,
    );
  });

  it('does not depend on the unit of length', () => {
    fc.assert(
      fc.property(anySetup, fc.constantFrom(1 / 0.3048, 3937 / 1200, 0.5), (input, scale) => {
        const fit = fitStation(input);
        const { accuracy, surroundings } = input;
        const other = fitStation({
          ...input,
          surroundings: { ...surroundings, earthRadius: surroundings.earthRadius * scale },
          accuracy: {
            ...accuracy,
            distance: accuracy.distance * scale,
            targetCentring: accuracy.targetCentring * scale,
            targetHeight: accuracy.targetHeight * scale,
          },
          control: new Map(
            [...input.control].map(([name, mark]) => [
              name,
              {
                ...mark,
                easting: mark.easting * scale,
                northing: mark.northing * scale,
                elevation: mark.elevation === null ? null : mark.elevation * scale,
                horizontalSigma: mark.horizontalSigma * scale,
                verticalSigma: mark.verticalSigma * scale,
              },
            ]),
          ),
          shots: input.shots.map((shot) => ({
            ...shot,
            targetHeight: shot.targetHeight * scale,
            distance: {
              ...shot.distance!,
              slopeDistance: shot.distance!.slopeDistance * scale,
              prismConstantMm: shot.distance!.prismConstantMm * scale,
              prismConstantAppliedMm: shot.distance!.prismConstantAppliedMm * scale,
            },
          })),
        });
        near(other.station.easting / scale, fit.station.easting, 1e-7);
        near(other.station.northing / scale, fit.station.northing, 1e-7);
        near(other.station.axis / scale, fit.station.axis, 1e-7);
        near(wrapDifference(other.station.orientation - fit.station.orientation), 0, 1e-10);
        near(other.ellipse95.semiMajor / scale, fit.ellipse95.semiMajor, 1e-9);
        sameStatistics(fit, other);
      }),
      RUNS,
    );
  });
});

describe('what errors of control, centring and target height leave', () => {
  /** Standard deviations of easting, northing and axis. */
  const sigmas = (fit: StationFit) => [0, 6, 12].map((i) => Math.sqrt(fit.station.covariance[i]) / fit.scale);
  const repeated = (input: Input, times: number): Input => ({
    ...input,
    shots: Array.from({ length: times }, (_, i) =>
      input.shots.map((shot) => ({ ...shot, set: shot.set + 10 * i })),
    ).flat(),
  });

  it('does not shrink with repeats, second faces and better readings', () => {
    fc.assert(
      fc.property(anySetup, (input) => {
        const perfect = { ...input.accuracy, direction: 1e-9, zenith: 1e-9, distance: 1e-7, distancePpm: 0 };
        const bound = sigmas(fitStation({ ...input, accuracy: perfect }));
        let before = sigmas(fitStation(input));
        for (const times of [2, 8, 32]) {
          const now = sigmas(fitStation(repeated(input, times)));
          now.forEach((sigma, axis) => {
            expect(sigma).toBeLessThanOrEqual(before[axis] * (1 + 1e-9));
            expect(sigma).toBeGreaterThanOrEqual(bound[axis] * (1 - 1e-6));
          });
          before = now;
        }
      }),
      { numRuns: 40, seed: 8 },
    );
  });

  it('is the whole standard deviation of a mark that stands alone for the height', () => {
    const chance = seededChance(9);
    const site = randomSite(chance);
    site.marks.forEach((mark, i) => {
      mark.hasElevation = i === 0;
    });
    const instrument = randomInstrument(chance);
    const input = asEngine(observe(site, instrument, { faces: ['left', 'right'], sets: 1 }, chance));
    const [, , axis] = sigmas(fitStation(repeated(input, 64)));
    expect(axis).toBeGreaterThan(Math.hypot(site.marks[0].verticalSigma, instrument.targetHeight));
  });
});

describe('a quarantined mark', () => {
  it('takes no part: the setup is the one without its shots, and says that it was left out', () => {
    const limits = {
      residual: { horizontal: 0.01, vertical: 0.01 },
      work: { radius: 100, horizontal: 0.03, vertical: 0.03 },
      checkRequired: false,
    };
    fc.assert(
      fc.property(anySetup, (input) => {
        const [first] = input.control.keys();
        const control = new Map(input.control);
        // Wrong by metres, so that any part that it took would show.
        const { easting, ...mark } = control.get(first)!;
        control.set(first, { ...mark, easting: easting + 5, status: 'quarantined' });
        const rest = input.shots.filter((shot) => shot.target !== first);
        const { result } = computeSetup({ ...input, control, limits, notes: [] });
        const alone = computeSetup({ ...input, shots: rest, limits, notes: [] });
        expect(result.station).toEqual(alone.result.station);
        expect(result.marks.map(({ name }) => name)).not.toContain(first);
        expect(result.leftOut).toMatchObject([{ name: first }]);
        expect(result.notes).toContainEqual({ code: 'mark_quarantined', target: first });
        expect(result.reasons).toEqual(alone.result.reasons);
      }),
      RUNS,
    );
  });
});

describe('an error that is stated to be zero', () => {
  it('stays an error of zero', () => {
    fc.assert(
      fc.property(anySetup, (input) => {
        const accuracy = { ...input.accuracy, collimation: 0, targetCentring: 0, targetHeight: 0 };
        const tiny = { ...input.accuracy, collimation: 1e-8, targetCentring: 1e-6, targetHeight: 1e-6 };
        const fit = fitStation({ ...input, accuracy });
        const other = fitStation({ ...input, accuracy: tiny });
        expect(fit.converged).toBe(true);
        near(fit.station.easting, other.station.easting, 1e-5);
        near(fit.station.northing, other.station.northing, 1e-5);
        near(fit.station.axis, other.station.axis, 1e-5);
        near(fit.test.value / other.test.value, 1, 0.01);
        expect(fit.test.degreesOfFreedom).toBe(other.test.degreesOfFreedom);
      }),
      RUNS,
    );
  });
});
