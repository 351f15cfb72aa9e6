import type { Lengths } from '@/lib/services/lengths';
import { asMoment } from '@/lib/services/moments';
import { presentDrift } from './driftWords';
import type { CheckRow, SetupRow } from './load';
import type { Words } from './words';

/** What the checks since the fit say of a setup, the newest first. */
export function watchWords(
  setup: Pick<SetupRow, 'station' | 'observedAt' | 'validUntil'>,
  checks: readonly CheckRow[],
  status: string,
  length: Lengths,
): Words[] {
  const words: Words[] = [];
  if (status === 'expired') {
    words.push({
      code: 'setup_expired',
      text: `${setup.station} ran out at ${asMoment(setup.validUntil!)}.`,
      action: 'Shoot a closing check, then release it again.',
    });
  }
  const last = checks.at(-1);
  if (!last) {
    const text = `No check since the fit at ${asMoment(setup.observedAt)}.`;
    const action = 'Shoot a mark of the fit for drift and a mark outside it for independence.';
    return [...words, { code: 'not_checked_since', text, action }];
  }
  const at = asMoment(last.observedAt);
  words.push(
    last.agreed
      ? { code: 'check_agreed', text: `The ${last.purpose} of ${at} agrees.` }
      : {
          code: 'check_not_agreed',
          text: `The ${last.purpose} of ${at} does not agree.`,
          action: 'Shoot it once more; if it stays, withdraw the setup and see what is affected.',
        },
  );
  const drift = last.result.drift ?? null;
  if (drift) {
    const { significant, text, action } = presentDrift(drift, length);
    words.push({ code: significant ? 'drifted' : 'no_drift', text, ...(action ? { action } : {}) });
  } else {
    words.push({
      code: 'drift_unknown',
      text: 'It shot no mark of the fit again, so it shows no drift.',
      action: 'Shoot two marks of the fit again.',
    });
  }
  return words;
}
