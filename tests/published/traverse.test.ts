import { expect, it } from 'vitest';
import { adjustNetwork } from '@/lib/compute/survey/network';
import { DEFAULT_SURROUNDINGS } from '@/lib/compute/survey/surroundings';

// Mahun, open-access surveying text, traverse adjustment solution 2 (feet): a loop of four courses, adjusted by the
// compass rule. That rule is the least-squares solution of courses whose latitudes and departures are uncorrelated and of
// variances that grow with length (Bowditch 1808; Ghilani and Wolf, Elementary Surveying, ch. 10).
it('adjusts Mahun’s traverse 2 as the compass rule does, its courses as vectors', () => {
  const courses = [
    [226, 54, 23, 639.15],
    [0, 0, 0, 523.69],
    [235, 2, 29, 409.54],
    [79, 35, 2, 815.93],
  ];
  const latitudes = [-436.631, 523.715, -234.64, 147.556];
  const departures = [-466.761, -0.023, -335.663, 802.447];
  const names = ['A', 'B', 'C', 'D'];
  const result = adjustNetwork({
    points: [
      {
        ...{ name: 'A', easting: 1000, northing: 1000, elevation: 0, horizontalSigma: 1, verticalSigma: 1 },
        ...{ horizontalDatum: 'held', verticalDatum: 'held' },
      },
    ],
    baselines: courses.map(([degrees, minutes, seconds, length], i) => {
      const azimuth = ((degrees + minutes / 60 + seconds / 3600) * Math.PI) / 180;
      const variance = length * 1e-6;
      return {
        ...{ id: `${i + 1}`, from: names[i], to: names[(i + 1) % 4], elevation: 0 },
        ...{ easting: length * Math.sin(azimuth), northing: length * Math.cos(azimuth) },
        covariance: [variance, 0, 0, 0, variance, 0, 0, 0, variance],
      };
    }),
    ...{ setups: [], levelDifferences: [], positions: [], snooping: false },
    surroundings: DEFAULT_SURROUNDINGS,
  });
  const at = new Map(result.points.map((point) => [point.name, point]));
  courses.forEach((_, i) => {
    const [from, to] = [at.get(names[i])!, at.get(names[(i + 1) % 4])!];
    expect(Math.abs(to.northing! - from.northing! - latitudes[i])).toBeLessThan(0.001);
    expect(Math.abs(to.easting! - from.easting! - departures[i])).toBeLessThan(0.001);
  });
  expect(result.test.degreesOfFreedom).toBe(3);
});
