import { isWithin, windowRule } from '@/lib/compute/grade/acceptance';
import { shiftByOffset } from '@/lib/compute/grade/lotOffset';
import type { Lengths } from '@/lib/services/lengths';
import type { Words } from '@/lib/services/setups/words';
import type { LayerRow } from './load';
import { type ActForm, againAct, trimAct } from './lotActs';
import { type LotCheck, type Outside, outsideOf } from './lotChecks';
import { offsetFigure } from './offset';

type Verdict = 'pass' | 'hold' | 'fail';

/** What to do next, without a full stop; null where nothing is to be done. */
type Act = ((form: ActForm) => string) | null;

export interface LotJudgement {
  verdict: Verdict;
  reasons: Words[];
  act: Act;
  outside: Outside;
  /** By how much the lot as a whole lies off, where that is the layer's offset, m. */
  shift: number | null;
}

/** A lot by its layer's rule; a lot that lies off by the layer's offset as a whole is told so first. */
export function judgeLot(
  layer: LayerRow,
  checks: readonly LotCheck[],
  percentWithinLimits: number | null,
  length: Lengths,
): LotJudgement {
  const outside = outsideOf(checks, layer);
  const { verdict, code, text, act } = judgeByRule(layer, checks, outside, percentWithinLimits, length);
  const deviations = checks.map(({ deviation }) => deviation);
  const shift = verdict === 'pass' ? null : shiftByOffset(deviations, layer.offset, layer);
  if (shift === null) {
    const reason = act ? { code, text, action: `${act('listed')}.` } : { code, text };
    return { verdict, reasons: [reason], act, outside, shift };
  }
  // Nobody trims by a lot that was measured against the wrong level.
  const reasons = [shiftReason(layer, shift, length), { code, text }];
  return { verdict, reasons, act: null, outside, shift };
}

function shiftReason(layer: LayerRow, shift: number, length: Lengths): Words {
  const size = length.text(Math.abs(shift));
  const where = shift === -layer.offset ? `on ${layer.surfaceName} itself` : 'at twice the offset';
  return {
    code: 'off_by_offset',
    text: `The lot as a whole lies ${size} ${shift > 0 ? 'high' : 'low'}, within the tolerance of the layer’s own offset (${offsetFigure(layer.offset, length)}): ground lies ${where}.`,
    action:
      'Find out whether the wrong offset was left on or off, or the wrong layer was shot, before anybody cuts or fills.',
  };
}

interface Judged {
  verdict: Verdict;
  code: string;
  text: string;
  act: Act;
}

/** The lot by its rule; without one, by its points. Rules count plain readings, as their clauses do. */
function judgeByRule(
  layer: LayerRow,
  checks: readonly LotCheck[],
  { high, low }: Outside,
  percentWithinLimits: number | null,
  length: Lengths,
): Judged {
  if (checks.length === 0) {
    const act = () => 'Shoot grade from a setup in force';
    return { verdict: 'hold', code: 'no_checks', text: 'No check counts yet.', act };
  }
  const outside = high.length + low.length;
  const trim = (form: ActForm) => trimAct(checks, { high, low }, form);
  const remedy = (form: ActForm) => trim(form) ?? 'Trim the lot closer to grade and shoot again';
  const judged = (verdict: Verdict, code: string, text: string): Judged => ({
    verdict,
    code,
    text,
    act: verdict === 'fail' ? remedy : null,
  });
  const tooFew = (text: string, missing: number): Judged => ({
    verdict: 'hold',
    code: 'too_few_checks',
    text,
    act: (form) => {
      const act = trim(form);
      return act ? `${act}, with at least ${missing} more` : `Shoot at least ${missing} more`;
    },
  });
  const limits = `${length.text(layer.below)} low to ${length.text(layer.above)} high`;
  const rule = layer.acceptance;
  switch (rule?.rule) {
    case undefined:
      return judgeByPoints(checks, remedy);
    case 'everyPoint': {
      const text = `Every point must lie within ${limits} (${rule.citation}); ${outside} of ${checks.length} do not.`;
      return judged(outside > 0 ? 'fail' : 'pass', 'every_point', text);
    }
    case 'window': {
      const within = checks.map(({ deviation }) => isWithin(deviation, layer));
      const met = windowRule(within, rule.required, rule.of);
      const clause = `${rule.required} of any ${rule.of} in a row must lie within ${limits} (${rule.citation})`;
      if (met === null)
        return tooFew(`${clause}; there are ${checks.length} so far.`, rule.of - checks.length);
      const text = `${clause}: ${met ? 'met' : 'not met'}; ${outside} of ${checks.length} lie outside.`;
      return judged(met ? 'pass' : 'fail', 'window', text);
    }
    case 'percentWithinLimits': {
      const clause = `${rule.minimum} % within limits are asked (${rule.citation})`;
      if (percentWithinLimits === null) {
        const text = `${clause}; three checks are the least, there are ${checks.length}.`;
        return tooFew(text, 3 - checks.length);
      }
      const text = `${clause}; ${percentWithinLimits.toFixed(0)} % by quality index. The figure holds for points drawn at random.`;
      return judged(percentWithinLimits >= rule.minimum ? 'pass' : 'fail', 'percent_within_limits', text);
    }
  }
}

function judgeByPoints(checks: readonly LotCheck[], remedy: Act): Judged {
  const count = (wanted: Verdict) => checks.filter(({ verdict }) => verdict === wanted).length;
  const [fail, hold] = [count('fail'), count('hold')];
  const code = 'no_acceptance_rule';
  const text = `No acceptance rule is set; each point was judged on its own: ${fail} of ${checks.length} fail and ${hold} are held.`;
  if (fail > 0) return { verdict: 'fail', code, text, act: remedy };
  if (hold > 0) return { verdict: 'hold', code, text, act: (form) => againAct(checks, form) };
  const act = () => 'Set the rule that the contract accepts a lot by, with its clause';
  return { verdict: 'pass', code, text, act };
}
