import { FORCE_WORDS } from '@/lib/services/setups/force';
import type { Words } from '@/lib/services/setups/words';

const GRADE_REASONS: Record<string, Words> = {
  ...FORCE_WORDS,
  outside_surface: {
    code: 'outside_surface',
    text: 'The point lies outside the design surface.',
    action: 'Check the point and the layer’s surface.',
  },
  too_close_to_call: {
    code: 'too_close_to_call',
    text: 'Too close to the limit to call with this uncertainty.',
    action: 'Shoot again from nearer by or in both faces.',
  },
  method_not_capable: {
    code: 'method_not_capable',
    text: 'With this uncertainty no reading could prove the tolerance.',
    action: 'Use a better method for this tolerance.',
  },
  judged_as_read: {
    code: 'judged_as_read',
    text: 'No uncertainty was stated: the reading was judged as read.',
    action: 'Send sigma with the point, or set the project’s positionSigma.',
  },
  ground_high: { code: 'ground_high', text: 'Ground is above the tolerance.', action: 'Cut.' },
  ground_low: { code: 'ground_low', text: 'Ground is below the tolerance.', action: 'Fill.' },
};

export function wordsOfGradeReason(code: string): Words {
  return GRADE_REASONS[code];
}
