import { describe, expect, it } from 'vitest';
import { type FaceReading, faceHistory } from '@/lib/compute/survey/collimation';
import { type Chance, seededChance } from '@/tests/simulator/chance';

const ARCSECOND = Math.PI / 648_000;
const ALLOWANCE = 4 * ARCSECOND;

/** Readings of a setup a day, by what the instrument does. */
function readings(chance: Chance, days: number, truth: (day: number) => number): FaceReading[] {
  return Array.from({ length: days }, (_, day) => {
    const sigma = (1 + 2 * chance.uniform()) * ARCSECOND;
    return { day, value: truth(day) * ARCSECOND + sigma * chance.normal(), sigma };
  });
}

describe('the collimation of an instrument', () => {
  it('that stands still is called changed or drifting in no more than 1 of 500 histories', () => {
    const chance = seededChance(31);
    let alarms = 0;
    for (let i = 0; i < 1000; i++) {
      const { change, drift, large, current, sigma } = faceHistory(
        readings(chance, 20, () => 6),
        ALLOWANCE,
      );
      if (change || drift) alarms++;
      expect(large).toBe(false);
      expect(Math.abs(current - 6 * ARCSECOND)).toBeLessThan(5 * sigma);
    }
    expect(alarms).toBeLessThanOrEqual(2);
  });

  it('that jumps by 12″ is called changed in 99 % of histories, at the very setup in 97 %', () => {
    const chance = seededChance(32);
    let changed = 0;
    let found = 0;
    for (let i = 0; i < 1000; i++) {
      const at = 2 + Math.floor(16 * chance.uniform());
      const history = faceHistory(
        readings(chance, 20, (day) => (day < at ? 3 : 15)),
        ALLOWANCE,
      );
      if (history.change) changed++;
      if (history.change?.since === at) found++;
      expect(history.drift).toBeNull();
    }
    expect(changed / 1000).toBeGreaterThan(0.99);
    expect(found / 1000).toBeGreaterThan(0.97);
  });

  it('shows a jump at the last setup alone, and in the second of two', () => {
    const reading = (day: number, seconds: number) => ({
      day,
      value: seconds * ARCSECOND,
      sigma: 2 * ARCSECOND,
    });
    const last = [1, 2, 3, 4].map((day) => reading(day, 2)).concat(reading(5, 40));
    expect(faceHistory(last, ALLOWANCE).change).toMatchObject({ since: 4 });
    expect(faceHistory([reading(1, 2), reading(2, 40)], ALLOWANCE).change).toMatchObject({ since: 1 });
    expect(faceHistory([reading(1, 2)], ALLOWANCE)).toMatchObject({
      change: null,
      drift: null,
      large: false,
    });
    expect(faceHistory([reading(1, 60)], ALLOWANCE).large).toBe(true);
  });

  it('that differs surely but by less than single faces are reckoned for is left alone', () => {
    const sharp = [0, 1, 2, 3, 4, 5].map((day) => ({
      day,
      value: (day < 3 ? 0 : 3) * ARCSECOND,
      sigma: 0.1 * ARCSECOND,
    }));
    expect(faceHistory(sharp, ALLOWANCE)).toMatchObject({ change: null, drift: null });
  });

  it('that scatters more than stated is not called changed for it', () => {
    const chance = seededChance(33);
    let alarms = 0;
    for (let i = 0; i < 500; i++) {
      const wild = readings(chance, 20, () => 8 * chance.normal());
      if (faceHistory(wild, ALLOWANCE).change) alarms++;
    }
    expect(alarms).toBeLessThanOrEqual(5);
  });

  it('that creeps is told as a drift where two means explain it no better than chance allows', () => {
    const slow = Array.from({ length: 12 }, (_, day) => ({
      day,
      value: day * ARCSECOND,
      sigma: 3 * ARCSECOND,
    }));
    const { change, drift, current } = faceHistory(slow, ALLOWANCE);
    // A creep over half a dozen setups looks like two means as well: one of both is told, and what it is now.
    expect(change !== null || drift !== null).toBe(true);
    expect(current).toBeGreaterThan(7 * ARCSECOND);
  });
});
