import { describe, expect, it } from 'vitest';
import { sightTo } from './sight';

const R = 6371008.8;

/**
 * The ray through air whose refractive index falls by k/R a metre: Bouguer's law n·r·sin z = constant makes
 * dz/ds = −sin z·(1/r − k/R), dr/ds = cos z, dθ/ds = sin z/r (Born and Wolf, Principles of Optics, §3.2), followed
 * by the classical Runge-Kutta method.
 */
function follow(zenith: number, length: number, k: number): { ground: number; rise: number } {
  const steps = 200;
  const h = length / steps;
  // Height above R rather than r itself, so that no digits are lost.
  const slopeOf = ([rise, , z]: number[]) => {
    const r = R + rise;
    return [Math.cos(z), Math.sin(z) / r, -Math.sin(z) * (1 / r - k / R)];
  };
  let state = [0, 0, zenith];
  const ahead = (by: number, rate: number[]) => state.map((value, i) => value + by * rate[i]);
  for (let i = 0; i < steps; i++) {
    const a = slopeOf(state);
    const b = slopeOf(ahead(h / 2, a));
    const c = slopeOf(ahead(h / 2, b));
    const d = slopeOf(ahead(h, c));
    state = state.map((value, j) => value + (h / 6) * (a[j] + 2 * b[j] + 2 * c[j] + d[j]));
  }
  return { ground: R * state[1], rise: state[0] };
}

describe('a simulated sight', () => {
  it.each([
    [90, 500, 0.13],
    [75, 300, 0.13],
    [100, 400, -0.8],
    [60, 250, 1.1],
    [89, 1000, 0.4],
  ])('is the ray that Bouguer’s law follows (zenith %f°, %f m, k = %f)', (degrees, length, k) => {
    const zenith = (degrees * Math.PI) / 180;
    const { ground, rise } = follow(zenith, length, k);
    const from = { easting: 0, northing: 0, height: 0 };
    const to = { easting: 0.6 * ground, northing: 0.8 * ground, height: rise };
    const sight = sightTo(from, to, k, { earthRadius: R, combinedFactor: 1 });
    expect(Math.abs(sight.zenith - zenith) * length).toBeLessThan(1e-7);
    expect(Math.abs(sight.slope - length)).toBeLessThan(1e-8);
    expect(sight.azimuth).toBeCloseTo(Math.atan2(0.6, 0.8), 12);
  });
});
