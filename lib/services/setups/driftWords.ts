import type * as z from 'zod';
import type { Drift, Estimate } from '@/lib/compute/survey/drift';
import { toArcseconds } from '@/lib/compute/units/convert';
import type { Lengths } from '@/lib/services/lengths';
import type { SetupDrift } from '@/openapi/schemas/setup';

/** How an instrument has drifted, in figures and in plain words. */
export function presentDrift(drift: Drift, length: Lengths): z.output<typeof SetupDrift> {
  const out = (estimate: Estimate | null) =>
    estimate && { value: length.out(estimate.value), standardDeviation: length.out(estimate.sigma) };
  const { marks, orientation, test, significant } = drift;
  return {
    marks,
    easting: out(drift.easting),
    northing: out(drift.northing),
    height: out(drift.height),
    orientationArcsec: {
      value: toArcseconds(orientation.value),
      standardDeviation: toArcseconds(orientation.sigma),
    },
    test: { value: test.statistic, critical: test.critical, degreesOfFreedom: test.degreesOfFreedom },
    significant,
    ...wordsOfDrift(drift, length),
  };
}

function wordsOfDrift(drift: Drift, length: Lengths): { text: string; action?: string } {
  const { marks, easting, northing, height, orientation, significant } = drift;
  const decimals = length.unit === 'm' ? 4 : 3;
  const seconds = (radians: number) => `${toArcseconds(Math.abs(radians)).toFixed(0)}″`;
  const parts = [`the circle has turned ${seconds(orientation.value)} ± ${seconds(orientation.sigma)}`];
  if (easting && northing) {
    const shift = Math.hypot(easting.value, northing.value);
    const sigma = Math.max(easting.sigma, northing.sigma);
    parts.push(
      `the instrument has shifted ${length.text(shift, decimals)} ± ${length.text(sigma, decimals)}`,
    );
  }
  if (height) {
    const way = height.value < 0 ? 'sunk' : 'risen';
    const size = length.text(Math.abs(height.value), decimals);
    parts.push(`it has ${way} ${size} ± ${length.text(height.sigma, decimals)}`);
  }
  const figures = `By ${marks.join(', ')}: ${parts.join('; ')} (one standard deviation).`;
  if (!significant) return { text: `No drift that shows. ${figures}` };
  return {
    text: `The setup has drifted. ${figures}`,
    action: 'Withdraw it and set up anew; what was shot since the last good check is affected.',
  };
}
