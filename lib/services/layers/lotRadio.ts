import type { DeviationStatistics } from '@/lib/compute/grade/acceptance';
import { gradeLabel } from '@/lib/compute/grade/label';
import type { Lengths } from '@/lib/services/lengths';
import type { LotJudgement } from './judgeLot';
import type { Outside } from './lotChecks';

/** One line to read out; it begins with the act. */
export function radioOfLot(
  layer: string,
  { verdict, act, outside, shift }: LotJudgement,
  statistics: DeviationStatistics,
  decimals: number,
  length: Lengths,
): string {
  if (statistics.mean === null) return `Wait. Nothing counts yet on ${layer}.`;
  if (shift !== null) {
    const size = sizeText(Math.abs(length.out(shift)), decimals, length);
    return `Stop and check the offset. All of ${layer} lies off by its own offset, ${size} ${shift > 0 ? 'high' : 'low'}: wrong offset left on or off, or the wrong layer.`;
  }
  const share = shareText(statistics, decimals, length);
  switch (verdict) {
    case 'pass':
      return `Accepted. ${layer}: ${share}.`;
    case 'hold':
      return `Wait. ${layer} is not proven yet: ${share}.${act ? ` ${act('radio')}.` : ''}`;
    case 'fail': {
      const text = outside.worst
        ? outsideText(outside, statistics.count, decimals, length)
        : `${share}, but the lot as a whole lies too close to its limits`;
      return `${act ? `${act('radio')}. ` : ''}${layer} is not accepted: ${text}.`;
    }
  }
}

function sizeText(size: number, decimals: number, length: Lengths): string {
  return `${size.toFixed(decimals)} ${length.name}`;
}

function shareText(
  { mean, count, withinTolerance }: DeviationStatistics,
  decimals: number,
  length: Lengths,
): string {
  const bias = length.out(mean ?? 0);
  const inside = `${withinTolerance} of ${count} inside tolerance`;
  if (gradeLabel(bias, decimals) === 'GRADE') return `${inside}, on grade on average`;
  return `${inside}, ${sizeText(Math.abs(bias), decimals, length)} ${bias > 0 ? 'high' : 'low'} on average`;
}

function outsideText(
  { high, low, worst }: Outside,
  count: number,
  decimals: number,
  length: Lengths,
): string {
  const [first, second] = high.length > 0 ? (['high', 'low'] as const) : (['low', 'high'] as const);
  const numbers = { high: high.length, low: low.length };
  const counts = `${numbers[first]} of ${count} ${first}, ${numbers[second] || 'none'} ${second}`;
  return worst
    ? `${counts}; worst ${gradeLabel(length.out(worst.deviation), decimals)} at ${worst.name}`
    : counts;
}
