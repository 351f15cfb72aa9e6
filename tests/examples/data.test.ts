import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { chance } from './generator/chance';
import { DATA_FOLDER, dataFiles } from './generator/files';

describe('examples/data', () => {
  const files = dataFiles();

  it('holds the files of the generator and no others', () => {
    expect(readdirSync(DATA_FOLDER).sort()).toEqual(Object.keys(files).sort());
  });

  it.each(Object.keys(files))('%s is what the generator writes, byte for byte', (name) => {
    expect(readFileSync(new URL(name, DATA_FOLDER)).equals(Buffer.from(files[name]))).toBe(true);
  });
});

describe('the generator’s chance', () => {
  // Printed by an implementation of FNV-1a (32 bit) and mulberry32 in Python, written for this test.
  it('draws what its seed says', () => {
    const drawn = chance('Thistledown Yard');
    expect([0, 0, 0].map(() => drawn.between(0, 1))).toEqual([
      0.6532713396009058, 0.24248175765387714, 0.7219566982239485,
    ]);
  });

  it('is normal about zero: mean and deviation of 20,000 within five of their own deviations', () => {
    const drawn = chance('normal');
    const values = Array.from({ length: 20_000 }, () => drawn.normal(3));
    const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
    const square = values.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (values.length - 1);
    expect(Math.abs(mean)).toBeLessThan((5 * 3) / Math.sqrt(values.length));
    expect(Math.abs(Math.sqrt(square) - 3)).toBeLessThan((5 * 3) / Math.sqrt(2 * values.length));
  });
});
