import type { FaceHistory } from '@/lib/compute/survey/collimation';
import { toArcseconds } from '@/lib/compute/units/convert';

interface HistoryWords {
  state: 'unknown' | 'steady' | 'changed' | 'drifting';
  text: string;
  action?: string;
}

const NAME = { twoCollimation: '2c', verticalIndex: 'The vertical index' } as const;

/** @param since station of the first setup after a change */
export function wordsOfHistory(
  quantity: keyof typeof NAME,
  found: FaceHistory | null,
  since: string | null,
): HistoryWords {
  const name = NAME[quantity];
  if (!found) {
    return {
      state: 'unknown',
      text: 'No setup since the last calibration was read in both faces.',
      action: 'Read one set in both faces to each mark.',
    };
  }
  const now = `${seconds(found.current)} ± ${seconds(found.sigma)}`;
  const adjust = 'Work in both faces; adjust the instrument, then state a new calibration.';
  if (found.change) {
    return {
      state: 'changed',
      text: `${name} changed from ${seconds(found.change.before)} to ${now} at ${since}: the instrument was knocked, or warmed up unevenly. Single faces since then are off by that much.`,
      action: `${adjust} Check what was shot in one face since ${since}.`,
    };
  }
  if (found.drift) {
    return {
      state: 'drifting',
      text: `${name} drifts by ${seconds(found.drift.perDay)} a day; now ${now}.`,
      action: adjust,
    };
  }
  if (found.large) {
    return {
      state: 'steady',
      text: `${name} stands still at ${now}, but that is more than a single face is reckoned to leave in.`,
      action: adjust,
    };
  }
  return { state: 'steady', text: `${name} stands still at ${now}.` };
}

function seconds(radians: number): string {
  return `${toArcseconds(radians).toFixed(1)}″`;
}
