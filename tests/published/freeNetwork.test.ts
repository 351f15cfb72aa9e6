import { describe, expect, it } from 'vitest';
import { adjustNetwork } from '@/lib/compute/survey/network';
import type { NetworkInput } from '@/lib/compute/survey/networkInput';
import type { Shot } from '@/lib/compute/survey/shots';

// Budapest University of Technology and Economics, open lab tutorials, horiz_net.rst: a free network of four points in
// plan, ten distances of 1 mm and ten directions of 0.0006 gon. The printed output is suspect: vᵀPv 8.66432 with σ₀ 0.93
// means ten degrees of freedom where twenty observations of eight coordinates and four orientations, less a datum defect
// of three, leave eleven. Coordinates are held to the print, within its datum; the rest was computed anew with numpy.
describe('free network of the Budapest open lab tutorials', () => {
  const GON = Math.PI / 200;
  const given = [
    [-87.492, 24.944],
    [-20.941, 24.578],
    [0.002, 0.002],
    [-87.927, -0.006],
  ];
  const distances = [
    [1, 2, 66.552],
    [1, 4, 24.954],
    [2, 1, 66.552],
    [2, 3, 32.288],
    [2, 4, 71.355],
    [3, 2, 32.289],
    [3, 4, 87.929],
    [4, 1, 24.955],
    [4, 2, 71.355],
    [4, 3, 87.929],
  ];
  const directions = [
    [1, 2, 100.3498],
    [1, 4, 201.1093],
    [2, 1, 300.3494],
    [2, 3, 155.0715],
    [2, 4, 277.6076],
    [3, 2, 355.0758],
    [3, 4, 300.0],
    [4, 1, 1.119],
    [4, 2, 77.6151],
    [4, 3, 100.0014],
  ];

  /** A sight in both faces, so that it is free of collimation and as good as stated; the distance read once. */
  const sight = (to: number, gon: number, slopeDistance: number): Shot[] =>
    (['left', 'right'] as const).map((face) => ({
      ...{ id: `${to} ${face}`, target: `${to}`, purpose: 'orient', face, set: 1, zenith: null },
      direction: gon * GON + (face === 'left' ? 0 : Math.PI),
      distance:
        face === 'left'
          ? { slopeDistance, prismConstantMm: 0, prismConstantAppliedMm: 0, appliedPpm: 0 }
          : null,
      ...{ targetHeight: 0, targetCentringSigma: null, targetHeightSigma: null },
    }));
  const input: NetworkInput = {
    points: given.map(([easting, northing], i) => ({
      ...{ name: `${i + 1}`, easting, northing, elevation: 0, horizontalSigma: 1, verticalSigma: 1 },
      ...{ horizontalDatum: 'free', verticalDatum: 'held' },
    })),
    setups: [1, 2, 3, 4].map((station) => ({
      ...{ id: `S${station}`, occupied: `${station}`, instrumentHeight: 0, ppm: 0 },
      accuracy: {
        ...{ direction: 0.0006 * GON, zenith: 1, distance: 0.001, distancePpm: 0, collimation: 1 },
        ...{ instrumentCentring: 0, targetCentring: 0, targetHeight: 0 },
      },
      shots: directions.flatMap(([from, to, gon], i) =>
        from === station ? sight(to, gon, distances[i][2]) : [],
      ),
    })),
    ...{ levelDifferences: [], positions: [], baselines: [], snooping: false },
    surroundings: {
      ...{ combinedFactor: 1, refraction: 0, refractionSigma: 0, unknownAtmospherePpm: 0 },
      // In plan: as good as flat.
      earthRadius: 1e12,
    },
  };
  const result = adjustNetwork(input);
  const residuals = (kind: string) =>
    result.observations.flatMap((observation) => (observation.kind === kind ? observation.residual : []));

  it('has a datum defect of three, settled by the free coordinates', () => {
    expect([...result.datum.free].sort()).toEqual(['easting', 'northing', 'rotation']);
    expect(result.unknowns).toBe(12);
    expect(result.test.degreesOfFreedom).toBe(11);
  });

  it('comes to the printed coordinates within 2 mm', () => {
    const printed = [
      [-87.492, 24.945],
      [-20.941, 24.577],
      [0.002, 0.001],
      [-87.927, -0.005],
    ];
    printed.forEach(([easting, northing], i) => {
      expect(Math.abs(result.points[i].easting! - easting)).toBeLessThan(0.002);
      expect(Math.abs(result.points[i].northing! - northing)).toBeLessThan(0.002);
    });
  });

  it('has vᵀPv 8.6219 and σ₀ 0.8853, whatever the datum', () => {
    expect(result.test.value).toBeCloseTo(8.6219, 4);
    expect(result.test.sigma0).toBeCloseTo(0.8853, 4);
  });

  it('leaves the corrections of distances, m, and directions, gon', () => {
    const ofDistances = [3, 14, 3, 75, 16, -25, -14, -86, 16, -14].map((v) => v * 1e-5);
    const ofDirections = [-50, 50, 78, -57, -20, 59, -59, -49, 12, 37].map((v) => v * 1e-5);
    residuals('distance').forEach((residual, i) => {
      expect(Math.abs(-residual - ofDistances[i])).toBeLessThan(0.000006);
    });
    residuals('direction').forEach((residual, i) => {
      expect(Math.abs(-residual / GON - ofDirections[i])).toBeLessThan(0.000006);
    });
  });

  it('keeps the corrections of the coordinates without shift or rotation', () => {
    const moved = result.points.map(({ shift }) => [shift.easting!, shift.northing!]);
    const sum = (of: (i: number) => number) => moved.reduce((total, _, i) => total + of(i), 0);
    expect(Math.abs(sum((i) => moved[i][0]))).toBeLessThan(1e-12);
    expect(Math.abs(sum((i) => moved[i][1]))).toBeLessThan(1e-12);
    const turned = (i: number) =>
      result.points[i].northing! * moved[i][0] - result.points[i].easting! * moved[i][1];
    expect(Math.abs(sum(turned))).toBeLessThan(1e-10);
  });
});
