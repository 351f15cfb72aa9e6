import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { seededChance } from './chance';

const sources = readdirSync('tests/simulator').filter((name) => !name.endsWith('.test.ts'));

describe('the simulator', () => {
  it.each(sources)('imports nothing but its own files: %s', (name) => {
    const text = readFileSync(`tests/simulator/${name}`, 'utf8');
    const imported = [...text.matchAll(/(?:from|import)\s*\(?\s*'([^']+)'/g)].map(([, from]) => from);
    expect(imported.filter((from) => !from.startsWith('./'))).toEqual([]);
  });

  it('draws the same from the same seed, and something else from another', () => {
    const draws = (seed: number) => {
      const chance = seededChance(seed);
      return Array.from({ length: 10 }, () => chance.normal());
    };
    expect(draws(1)).toEqual(draws(1));
    expect(draws(1)).not.toEqual(draws(2));
  });

  it('draws standard normal errors: mean 0, variance 1, no skew, kurtosis 3, no correlation', () => {
    const chance = seededChance(5);
    const n = 200_000;
    const x = Float64Array.from({ length: n }, () => chance.normal());
    const moment = (of: (value: number, i: number) => number) =>
      x.reduce((sum, value, i) => sum + of(value, i), 0) / n;
    // Within four standard deviations of each estimate.
    expect(Math.abs(moment((v) => v))).toBeLessThan(4 / Math.sqrt(n));
    expect(Math.abs(moment((v) => v * v) - 1)).toBeLessThan(4 * Math.sqrt(2 / n));
    expect(Math.abs(moment((v) => v ** 3))).toBeLessThan(4 * Math.sqrt(15 / n));
    expect(Math.abs(moment((v) => v ** 4) - 3)).toBeLessThan(4 * Math.sqrt(96 / n));
    expect(Math.abs(moment((v, i) => v * x[(i + 1) % n]))).toBeLessThan(4 / Math.sqrt(n));
  });
});
