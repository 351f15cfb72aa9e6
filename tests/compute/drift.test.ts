import { describe, expect, it } from 'vitest';
import { checkDifferences, type FittedSetup, type LaterShots } from '@/lib/compute/survey/checkShots';
import { driftOf } from '@/lib/compute/survey/drift';
import { explainLater } from '@/lib/compute/survey/explainLater';
import { fitStation } from '@/lib/compute/survey/stationFit';
import { between, type Chance, seededChance } from '@/tests/simulator/chance';
import { type Observed, observe } from '@/tests/simulator/observe';
import { randomInstrument, randomSite } from '@/tests/simulator/randomSite';
import { asEngine, asShot } from './asEngine';

const ARCSECOND = Math.PI / 648_000;
const PROGRAMME = { faces: ['left', 'right'] as ('left' | 'right')[], sets: 1 };

interface Since {
  easting?: number;
  northing?: number;
  height?: number;
  turn?: number;
  mark?: { name: string; easting: number; northing: number };
}

/** A setup, and the same marks shot again from it after something has changed. */
function againLater(chance: Chance, since: Since, marks: readonly string[]): LaterShots & FittedSetup {
  const site = randomSite(chance, { marks: [4, 6], allRound: true });
  const instrument = randomInstrument(chance);
  const first = observe(site, instrument, PROGRAMME, chance);
  const { easting = 0, northing = 0, height = 0, turn = 0, mark } = since;
  const { station } = site;
  const later: Observed = observe(
    {
      ...site,
      station: {
        easting: station.easting + easting,
        northing: station.northing + northing,
        height: station.height + height,
      },
      orientation: site.orientation + turn,
      marks: site.marks
        .filter(({ name }) => marks.includes(name))
        .map((one) =>
          one.name === mark?.name
            ? { ...one, easting: one.easting + mark.easting, northing: one.northing + mark.northing }
            : one,
        ),
    },
    instrument,
    PROGRAMME,
    chance,
  );
  const input = asEngine(first);
  const fit = fitStation(input);
  return {
    shots: later.pointings.map((pointing) => asShot(pointing, site, 'closing')),
    control: input.control,
    accuracy: input.accuracy,
    ppm: input.ppm,
    surroundings: input.surroundings,
    station: fit.station,
    heightDetermined: fit.heightDetermined,
    scale: fit.scale,
    crossCovariance: new Map(fit.marks.map(({ name, stationCovariance }) => [name, stationCovariance])),
  };
}

const THREE = ['M1', 'M2', 'M3'];

describe.each([1, 2, 3])('an instrument between its first and its closing shots, seed %i', (seed) => {
  it('does not drift where it stood still', () => {
    const chance = seededChance(seed);
    const setups = 400;
    let drifting = 0;
    const normal: number[] = [];
    for (let i = 0; i < setups; i++) {
      const drift = driftOf(againLater(chance, {}, i % 2 ? THREE : ['M2']))!;
      if (drift.significant) drifting++;
      normal.push(drift.orientation.value / drift.orientation.sigma);
    }
    const variance = normal.reduce((sum, value) => sum + value * value, 0) / setups;
    console.log(
      `seed ${seed}: ${drifting} of ${setups} seem to drift, turn over σ ${Math.sqrt(variance).toFixed(2)}`,
    );
    expect(drifting / setups).toBeLessThanOrEqual(0.03);
    expect(variance).toBeGreaterThan(0.75);
    expect(variance).toBeLessThan(1.3);
  });

  it('drifts by as much as it was moved, within what is stated', () => {
    const chance = seededChance(10 + seed);
    const setups = 300;
    const squares = { easting: 0, northing: 0, height: 0, turn: 0 };
    for (let i = 0; i < setups; i++) {
      const moved = {
        easting: between(chance, -0.03, 0.03),
        northing: between(chance, -0.03, 0.03),
        height: between(chance, -0.02, 0.02),
        turn: between(chance, -0.5, 0.5) * (Math.PI / 180),
      };
      const drift = driftOf(againLater(chance, moved, THREE))!;
      squares.easting += ((drift.easting!.value - moved.easting) / drift.easting!.sigma) ** 2;
      squares.northing += ((drift.northing!.value - moved.northing) / drift.northing!.sigma) ** 2;
      squares.height += ((drift.height!.value - moved.height) / drift.height!.sigma) ** 2;
      squares.turn += ((drift.orientation.value - moved.turn) / drift.orientation.sigma) ** 2;
    }
    for (const sum of Object.values(squares)) {
      expect(sum / setups).toBeGreaterThan(0.7);
      expect(sum / setups).toBeLessThan(1.35);
    }
  });

  it.each([
    [
      'an instrument that was kicked',
      'instrumentMoved',
      { easting: 0.02, northing: -0.015, height: -0.004, turn: 40 * ARCSECOND },
    ],
    ['a circle that turned', 'instrumentMoved', { turn: 150 * ARCSECOND }],
    ['a mark that moved', 'targetMoved', { mark: { name: 'M2', easting: 0.04, northing: 0.03 } }],
    ['nothing', 'none', {}],
  ] as const)('is explained: %s', (name, fault, since) => {
    const chance = seededChance(20 + seed);
    const setups = 200;
    let right = 0;
    const sizes: number[] = [];
    for (let i = 0; i < setups; i++) {
      const explanations = explainLater(againLater(chance, since, ['M1', 'M2', 'M3', 'M4']));
      const [first] = explanations;
      expect(explanations.reduce((sum, { weight }) => sum + weight, 0)).toBeCloseTo(1, 9);
      if (first.fault !== fault || (fault === 'targetMoved' && first.subject[0] !== 'M2')) continue;
      right++;
      sizes.push(first.size ?? 0);
    }
    const median = sizes.sort((a, b) => a - b)[sizes.length >> 1];
    console.log(
      `seed ${seed}, ${name}: ${((100 * right) / setups).toFixed(1)} %, median size ${(1000 * median).toFixed(1)} mm`,
    );
    expect(right / setups).toBeGreaterThanOrEqual(0.9);
  });
});

describe('drift and check', () => {
  it('tell a turn from one mark, and nothing of marks outside the fit', () => {
    const chance = seededChance(7);
    const turn = 300 * ARCSECOND;
    const later = againLater(chance, { turn }, ['M1']);
    const drift = driftOf(later)!;
    expect(drift).toMatchObject({ marks: ['M1'], easting: null, northing: null, significant: true });
    expect(Math.abs(drift.orientation.value - turn)).toBeLessThan(4 * drift.orientation.sigma);
    const outside = { ...later, crossCovariance: new Map() };
    expect(driftOf(outside)).toBeNull();
    expect(checkDifferences({ ...outside, tolerance: { horizontal: 1, vertical: 1 } })).toHaveLength(1);
  });
});
