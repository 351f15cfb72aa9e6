import { describe, expect, it } from 'vitest';
import { solve } from '@/lib/compute/adjustment/solve';
import { linear, type SmallObservation, smallModel } from './smallModel';

// Ghilani, Adjustment Computations (5th ed.), example 18.1: four-parameter transformation in the plane, unit weights,
// X = ax − by + Tx, Y = bx + ay + Ty. Rotation and scale from memory, all else as printed.
describe('plane conformal transformation of Ghilani, example 18.1', () => {
  const source = [
    [121.622, -128.066],
    [141.228, 187.718],
    [175.802, 135.728],
  ];
  const target = [
    [1049422.4, 51089.2],
    [1049413.95, 49659.3],
    [1049244.95, 49884.95],
  ];
  const model = smallModel(
    4,
    source.flatMap(([x, y], i): SmallObservation[] => [
      linear({ 0: x, 1: -y, 2: 1 }, target[i][0], 1),
      linear({ 0: y, 1: x, 3: 1 }, target[i][1], 1),
    ]),
  );
  const {
    unknowns: [a, b, tx, ty],
    converged,
    weightedSquares,
    degreesOfFreedom,
  } = solve(model, new Float64Array(4));

  it('gives the printed parameters', () => {
    expect(converged).toBe(true);
    expect(a).toBeCloseTo(-4.51249, 5);
    expect(b).toBeCloseTo(-0.25371, 5);
    expect(tx).toBeCloseTo(1050003.715, 3);
    expect(ty).toBeCloseTo(50542.131, 3);
    expect(Math.hypot(a, b)).toBeCloseTo(4.51962, 5);
    const rotation = (Math.atan2(b, a) * 180) / Math.PI + 360;
    expect(rotation * 3600).toBeCloseTo(183 * 3600 + 13 * 60 + 5, 0);
    // Recomputed, not printed.
    expect(degreesOfFreedom).toBe(2);
    expect(Math.sqrt(weightedSquares / 2)).toBeCloseTo(0.1398, 4);
  });

  it.each([
    [174.148, -120.262, 1049187.361, 51040.629],
    [513.52, -192.13, 1047637.713, 51278.829],
    [754.444, -67.706, 1046582.113, 50656.241],
    [972.788, 120.994, 1045644.713, 49749.336],
  ])('transforms (%f, %f) to the printed (%f, %f)', (x, y, east, north) => {
    expect(Math.abs(a * x - b * y + tx - east)).toBeLessThan(0.001);
    expect(Math.abs(b * x + a * y + ty - north)).toBeLessThan(0.001);
  });
});

// Budapest University of Technology and Economics, open lab tutorials, horiz_net.rst: a network of distances and
// directions. The printed vᵀPv (8.66432, with m₀ 0.93) is suspect: it was recomputed with numpy, independent of the
// datum, as 8.6219 with 11 degrees of freedom, m₀ 0.8853; so were the residuals. Printed coordinates hold to 2 mm.
describe('plane network of the Budapest open lab tutorials, held by three coordinates', () => {
  const GON = Math.PI / 200;
  const start = [
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
  const east = (point: number) => 2 * (point - 1);
  const orientation = (point: number) => 7 + point;
  const between = (x: Float64Array, from: number, to: number) => {
    const [de, dn] = [x[east(to)] - x[east(from)], x[east(to) + 1] - x[east(from) + 1]];
    return { de, dn, length: Math.hypot(de, dn) };
  };
  const observations: SmallObservation[] = [
    ...distances.map(
      ([from, to, value]): SmallObservation => ({
        columns: [east(from), east(from) + 1, east(to), east(to) + 1],
        value,
        sigma: 0.001,
        at(x) {
          const { de, dn, length } = between(x, from, to);
          const [e, n] = [de / length, dn / length];
          return { value: length, derivatives: [-e, -n, e, n] };
        },
      }),
    ),
    ...directions.map(
      ([from, to, gon]): SmallObservation => ({
        columns: [east(from), east(from) + 1, east(to), east(to) + 1, orientation(from)],
        value: gon * GON,
        sigma: 0.0006 * GON,
        angle: true,
        at(x) {
          const { de, dn, length } = between(x, from, to);
          const [e, n] = [dn / length ** 2, -de / length ** 2];
          return {
            value: Math.atan2(de, dn) - x[orientation(from)],
            derivatives: [-e, -n, e, n, -1],
          };
        },
      }),
    ),
    ...[4, 5, 7].map((unknown) => linear({ [unknown]: 1 }, start.flat()[unknown], 1e-6)),
  ];
  const solution = solve(smallModel(12, observations), Float64Array.from([...start.flat(), 0, 0, 0, 0]));

  it('has the vᵀPv and degrees of freedom that no choice of datum changes', () => {
    expect(solution.converged).toBe(true);
    expect(solution.degreesOfFreedom).toBe(11);
    expect(solution.weightedSquares).toBeCloseTo(8.6219, 4);
    expect(Math.sqrt(solution.weightedSquares / 11)).toBeCloseTo(0.8853, 4);
  });

  it('has the residuals of the recomputation', () => {
    const metres = [3, 14, 3, 75, 16, -25, -14, -86, 16, -14];
    const gon = [-50, 50, 78, -57, -20, 59, -59, -49, 12, 37];
    // Corrections, fitted minus observed, in 10⁻⁵ m and 10⁻⁵ gon.
    const corrections = Array.from(solution.residuals.subarray(0, 20), (residual) => -residual * 1e5);
    for (const [i, v] of metres.entries()) expect(Math.abs(corrections[i] - v)).toBeLessThan(0.6);
    for (const [i, v] of gon.entries()) expect(Math.abs(corrections[10 + i] / GON - v)).toBeLessThan(0.6);
  });

  it('comes within 2 mm of the printed coordinates', () => {
    const printed = [-87.492, 24.945, -20.941, 24.577, 0.002, 0.001, -87.927, -0.005];
    for (const [i, value] of printed.entries()) {
      expect(Math.abs(solution.unknowns[i] - value)).toBeLessThan(0.002);
    }
  });
});
