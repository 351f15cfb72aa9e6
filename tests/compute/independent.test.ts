import { spawnSync } from 'node:child_process';
import { beforeAll, describe, expect, it } from 'vitest';
import { fitStation, type StationFit } from '@/lib/compute/survey/stationFit';
import { wrapDifference } from '@/lib/compute/units/angles';
import { seededChance, wholeBetween } from '@/tests/simulator/chance';
import { type Observed, observe } from '@/tests/simulator/observe';
import { type Kind, randomInstrument, randomSite } from '@/tests/simulator/randomSite';
import { asEngine } from './asEngine';

const CASES = 100;
const PYTHON = '/usr/bin/python3';
const DELTA_0 = 4.13;

interface Answer {
  unknowns: number[];
  covariance: number[][];
  weightedSquares: number;
  degreesOfFreedom: number;
  withPublished: Record<string, number[][]>;
  polar: Record<string, [number, number, number | null]>;
  readings: { target: string; kind: string; set: number; residual: number; redundancy: number }[];
  fullWeights: {
    covariance: number[][];
    weightedSquares: number;
    redundancy: number[];
    standardised: number[];
  };
}

const probe = spawnSync(PYTHON, ['-c', 'import scipy.optimize, scipy.linalg'], { encoding: 'utf8' });
const missing = probe.status === 0 ? null : (probe.stderr?.trim().split('\n').at(-1) ?? String(probe.error));
if (missing) console.log(`Skipped: no scipy to compare with (install python3-scipy). ${missing}`);

/** Every kind of setup in turn: faces, rounds, unmeasured air, two reflectors, marks without elevation, grids. */
function simulated(): Observed[] {
  const chance = seededChance(20);
  const kinds: Kind[] = [
    {},
    { unknownAirPpm: 10 },
    { secondReflector: true },
    { withoutElevation: 1 },
    { combinedFactor: 0.9996 },
    { secondReflector: true, withoutElevation: 2, unknownAirPpm: 5, combinedFactor: 1.0003 },
  ];
  const faces = [['left'], ['right'], ['left', 'right']] as const;
  return Array.from({ length: CASES }, (_, i) => {
    const site = randomSite(chance, kinds[i % kinds.length]);
    const programme = { faces: [...faces[wholeBetween(chance, 0, 2)]], sets: wholeBetween(chance, 1, 2) };
    return observe(site, randomInstrument(chance), programme, chance);
  });
}

/** An observed setup as the script reads it; it starts at the true station. */
function asCase(observed: Observed) {
  const { site } = observed;
  const { accuracy, surroundings, ppm } = asEngine(observed);
  return {
    accuracy,
    surroundings,
    ppm,
    control: Object.fromEntries(observed.published.map((mark) => [mark.name, mark])),
    start: {
      easting: site.station.easting,
      northing: site.station.northing,
      axis: site.station.height,
      orientation: site.orientation,
      heights: Object.fromEntries(site.marks.map((mark) => [mark.name, mark.height])),
    },
    shots: observed.pointings.map((pointing) => ({
      target: pointing.target,
      targetHeight: pointing.targetHeight,
      face: pointing.face,
      set: pointing.set,
      direction: pointing.horizontal,
      zenith: pointing.zenith,
      slope: pointing.slopeDistance,
      constant: site.prismConstantMm,
      constantApplied: site.prismConstantAppliedMm,
      appliedPpm: site.appliedPpm,
    })),
  };
}

describe.skipIf(missing)('100 random setups against an independent solution by scipy', () => {
  let pairs: { fit: StationFit; answer: Answer }[];

  beforeAll(() => {
    const observed = simulated();
    const { stdout, stderr, status } = spawnSync(PYTHON, ['tests/compute/independent.py'], {
      input: JSON.stringify({ cases: observed.map(asCase) }),
      // The matrices are small: more threads would only wait for each other.
      env: { ...process.env, OPENBLAS_NUM_THREADS: '1' },
      encoding: 'utf8',
      maxBuffer: 64e6,
    });
    if (status !== 0) throw new Error(stderr);
    const answers = JSON.parse(stdout) as Answer[];
    pairs = answers.map((answer, i) => ({ answer, fit: fitStation(asEngine(observed[i])) }));
  }, 60_000);

  it('agree to 1e-8 m in position and 1e-10 rad in orientation', () => {
    expect(pairs).toHaveLength(CASES);
    for (const { fit, answer } of pairs) {
      const [easting, northing, axis, orientation, refraction] = answer.unknowns;
      expect(Math.abs(fit.station.easting - easting)).toBeLessThan(1e-8);
      expect(Math.abs(fit.station.northing - northing)).toBeLessThan(1e-8);
      expect(Math.abs(fit.station.axis - axis)).toBeLessThan(1e-8);
      expect(Math.abs(wrapDifference(fit.station.orientation - orientation))).toBeLessThan(1e-10);
      expect(Math.abs(fit.station.refraction - refraction)).toBeLessThan(1e-6);
    }
  });

  it('agree to 1e-6 in the covariance of position, orientation and refraction', () => {
    for (const { fit, answer } of pairs) {
      covarianceAgrees(fit, answer.covariance);
      covarianceAgrees(fit, answer.fullWeights.covariance);
    }
  });

  it('agree to 1e-6 in the covariance of the station with the published coordinates of its marks', () => {
    for (const { fit, answer } of pairs) {
      for (const { name, stationCovariance } of fit.marks) {
        const expected = answer.withPublished[name].flat();
        const own = Array.from(stationCovariance, (value) => value / fit.scale ** 2);
        expect(own).toHaveLength(expected.length);
        own.forEach((value, i) => {
          const sigma = Math.sqrt(answer.covariance[Math.floor(i / 3)][Math.floor(i / 3)]);
          // In standard deviations of the unknown and 5 mm of the mark.
          expect(Math.abs(value - expected[i])).toBeLessThan(1e-6 * sigma * 0.005);
        });
      }
    }
  });

  it('agree in degrees of freedom and to 1e-6 in vᵀPv', () => {
    for (const { fit, answer } of pairs) {
      expect(fit.test.degreesOfFreedom).toBe(answer.degreesOfFreedom);
      relative(fit.test.value, answer.weightedSquares, 1e-6);
      relative(fit.test.value, answer.fullWeights.weightedSquares, 1e-6);
    }
  });

  it('agree to 1e-8 m in the polar positions of their marks minus the published ones', () => {
    for (const { fit, answer } of pairs) {
      for (const { name, residual } of fit.marks) {
        const [east, north, up] = answer.polar[name];
        expect(Math.abs(residual.easting! - east)).toBeLessThan(1e-8);
        expect(Math.abs(residual.northing! - north)).toBeLessThan(1e-8);
        if (up === null) expect(residual.elevation).toBeNull();
        else expect(Math.abs(residual.elevation! - up)).toBeLessThan(1e-8);
      }
    }
  });

  it('agree to 1e-6 in residuals, redundancy numbers, standardised residuals and detectable biases', () => {
    for (const { fit, answer } of pairs) {
      const readings = fit.marks.flatMap(({ name, readings: own }) =>
        own.map((reading) => ({ target: name, ...reading })),
      );
      expect(readings.map(({ target, kind, set }) => ({ target, kind, set }))).toEqual(
        answer.readings.map(({ target, kind, set }) => ({ target, kind, set })),
      );
      readings.forEach((reading, i) => {
        const other = answer.readings[i];
        const { redundancy, standardised } = answer.fullWeights;
        const sigma = (reading.minimalDetectable * Math.sqrt(reading.redundancy)) / DELTA_0;
        expect(Math.abs(reading.residual - other.residual) / sigma).toBeLessThan(1e-6);
        expect(Math.abs(reading.redundancy - other.redundancy)).toBeLessThan(1e-6);
        expect(Math.abs(reading.redundancy - redundancy[i])).toBeLessThan(1e-6);
        expect(Math.abs(reading.standardised - standardised[i])).toBeLessThan(1e-6);
      });
    }
  });
});

function relative(value: number, expected: number, tolerance: number) {
  expect(Math.abs(value - expected)).toBeLessThan(tolerance * Math.abs(expected));
}

/** Each element to 1e-6 of its two standard deviations; the engine's scaling by σ₀ taken off. */
function covarianceAgrees({ station, scale }: StationFit, expected: number[][]) {
  expected.forEach((row, i) => {
    row.forEach((value, j) => {
      const own = station.covariance[5 * i + j] / scale ** 2;
      expect(Math.abs(own - value)).toBeLessThan(1e-6 * Math.sqrt(expected[i][i] * expected[j][j]));
    });
  });
}
