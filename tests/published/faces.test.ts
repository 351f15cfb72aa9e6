import { describe, expect, it } from 'vitest';
import { meanFaces } from '@/lib/compute/survey/faces';
import { DEFAULT_ACCURACY } from '@/lib/compute/survey/instrument';
import type { Face, Shot } from '@/lib/compute/survey/shots';
import { toArcseconds } from '@/lib/compute/units/convert';
import { parseDms } from '@/lib/compute/units/dms';

function pointing(target: string, face: Face, direction: number): Shot {
  return {
    id: `${target}/${face}`,
    target,
    purpose: 'orient',
    face,
    set: 1,
    direction,
    zenith: face === 'left' ? Math.PI / 2 : 1.5 * Math.PI,
    distance: null,
    targetHeight: 0,
    targetCentringSigma: null,
    targetHeightSigma: null,
  };
}

// Ghilani and Wolf, Elementary Surveying, problem 8.23 (data read; the answer recomputed): direct readings and
// reverse readings already less 180°, the last one back on the first target.
describe('direction set of Ghilani and Wolf, problem 8.23', () => {
  const direct = ['0-00-00', '26-29-21', '92-57-44', '0-00-04'];
  const reverse = ['0-00-00', '26-29-17', '92-57-46', '0-00-02'];
  const shots = direct.flatMap((_, i) => [
    pointing(`T${i}`, 'left', parseDms(direct[i])!),
    pointing(`T${i}`, 'right', parseDms(reverse[i])! + Math.PI),
  ]);
  const [first, second, third, again] = meanFaces(shots, DEFAULT_ACCURACY, null)
    .readings.filter(({ kind }) => kind === 'direction')
    .map(({ value }) => value);

  it.each([
    ['26-29-19', second - first],
    ['66-28-26', third - second],
    ['267-02-18', again - third + 2 * Math.PI],
  ])('gives the mean angle %s', (expected, angle) => {
    expect(Math.abs(toArcseconds(angle - parseDms(expected)!))).toBeLessThan(0.5);
  });

  it('closes the horizon with 3″', () => {
    expect(toArcseconds(again - first)).toBeCloseTo(3, 6);
  });
});

// Ghilani and Wolf, Elementary Surveying, ch. 8 exercise (data read; the answer recomputed): a line of sight off by
// 12″ plunged once is off by 24″, 0.0349 m at 300 m.
it('reports twice the collimation of a line of sight that is off by 12″', () => {
  const off = parseDms('0-00-12')!;
  const shots = [pointing('T', 'left', 1 + off), pointing('T', 'right', 1 + Math.PI - off)];
  const { twoCollimation } = meanFaces(shots, DEFAULT_ACCURACY, null).faceErrors!;
  expect(toArcseconds(twoCollimation!)).toBeCloseTo(24, 6);
  expect(300 * Math.tan(twoCollimation!)).toBeCloseTo(0.0349, 4);
});
