import { betaDistribution, CRITICAL_W, normalCdf } from '@/lib/compute/statistics/distributions';

/** An error of an instrument as one setup shows it in pairs of faces. */
export interface FaceReading {
  /** When, in days from any beginning. */
  day: number;
  /** rad, with its standard deviation. */
  value: number;
  sigma: number;
}

export interface FaceHistory {
  /** What the error is now: the mean since it changed last, rad. */
  current: number;
  sigma: number;
  /** Index of the first reading since then, and the mean before; null where it never changed. */
  change: { since: number; before: number; standardised: number } | null;
  /** Change in a day where it creeps, rad; null where it does not. */
  drift: { perDay: number; sigma: number } | null;
  /** Beyond what single faces are reckoned to leave in. */
  large: boolean;
}

/** Error probability of calling a change what is chance, over all places where one might lie. */
export const ALPHA = 0.001;
/** Fewer readings tell no drift from a change. */
export const DRIFT_READINGS = 5;

/**
 * How an error that should stand still has behaved: a change of its mean at the likeliest place (two means, the
 * scatter within them against the stated accuracy, never reckoned smaller than stated: Birge 1932), or else a drift
 * by weighted regression. Both count only where they are larger than what single faces are reckoned to leave in:
 * what is certain and small moves no dirt.
 *
 * @param readings in their order of time, one at least
 * @param allowance one standard deviation of what a single face may leave in, rad
 */
export function faceHistory(readings: readonly FaceReading[], allowance: number): FaceHistory {
  const change = likeliestChange(readings, allowance);
  const drift = change ? null : driftOf(readings, allowance);
  const present = level(change ? readings.slice(change.since) : readings);
  const [last] = readings.slice(-1);
  const current = drift ? last.value : present.mean;
  return {
    current,
    sigma: drift ? last.sigma : Math.sqrt(1 / present.weight) * present.birge,
    change,
    drift,
    large: Math.abs(current) > CRITICAL_W * allowance,
  };
}

function likeliestChange(readings: readonly FaceReading[], allowance: number): FaceHistory['change'] {
  const splits = readings.length - 1;
  const freedom = readings.length - 2;
  let best: { since: number; before: number; standardised: number; probability: number } | null = null;
  for (let since = 1; since <= splits; since++) {
    const [before, after] = [level(readings.slice(0, since)), level(readings.slice(since))];
    const birge = freedom > 0 ? Math.max(1, Math.sqrt((before.squares + after.squares) / freedom)) : 1;
    const difference = after.mean - before.mean;
    if (Math.abs(difference) <= allowance) continue;
    const standardised = difference / (birge * Math.sqrt(1 / before.weight + 1 / after.weight));
    const probability = byChance(standardised, birge > 1 ? freedom : null);
    const likelier =
      best === null ||
      probability < best.probability ||
      (probability === best.probability && Math.abs(standardised) > Math.abs(best.standardised));
    if (likelier) best = { since, before: before.mean, standardised, probability };
  }
  if (!best || best.probability > ALPHA / splits) return null;
  const { since, before, standardised } = best;
  return { since, before, standardised };
}

/** Two-sided probability of so much by chance: normal, or Student's t where the scatter was estimated. */
function byChance(standardised: number, freedom: number | null): number {
  if (freedom === null) return 2 * normalCdf(-Math.abs(standardised));
  return betaDistribution(freedom / (freedom + standardised ** 2), freedom / 2, 0.5);
}

function driftOf(readings: readonly FaceReading[], allowance: number): FaceHistory['drift'] {
  if (readings.length < DRIFT_READINGS) return null;
  const weights = readings.map(({ sigma }) => 1 / sigma ** 2);
  const whole = weights.reduce((a, b) => a + b, 0);
  const weighted = (of: (reading: FaceReading) => number) =>
    readings.reduce((sum, reading, i) => sum + weights[i] * of(reading), 0) / whole;
  const [day, value] = [weighted((r) => r.day), weighted((r) => r.value)];
  const spread = weighted((r) => (r.day - day) ** 2) * whole;
  if (spread === 0) return null;
  const perDay = (weighted((r) => (r.day - day) * (r.value - value)) * whole) / spread;
  const squares = weighted((r) => (r.value - value - perDay * (r.day - day)) ** 2) * whole;
  const birge = Math.max(1, Math.sqrt(squares / (readings.length - 2)));
  const sigma = birge / Math.sqrt(spread);
  const days = readings[readings.length - 1].day - readings[0].day;
  const telling = Math.abs(perDay * days) > allowance && Math.abs(perDay) > CRITICAL_W * sigma;
  return telling ? { perDay, sigma } : null;
}

/** Weighted mean of readings that should be alike. */
function level(readings: readonly FaceReading[]) {
  let weight = 0;
  let sum = 0;
  for (const { value, sigma } of readings) {
    weight += 1 / sigma ** 2;
    sum += value / sigma ** 2;
  }
  const mean = sum / weight;
  const squares = readings.reduce((total, { value, sigma }) => total + ((value - mean) / sigma) ** 2, 0);
  const birge = readings.length > 1 ? Math.max(1, Math.sqrt(squares / (readings.length - 1))) : 1;
  return { mean, weight, squares, birge };
}
