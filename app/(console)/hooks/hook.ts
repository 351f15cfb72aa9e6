import type * as z from 'zod';
import { moment } from '@/app/ui/numbers';
import type { Tone } from '@/app/ui/State';
import type { WebhookDelivery, WebhookEndpoint } from '@/openapi/schemas/webhook';

export type Hook = z.output<typeof WebhookEndpoint>;
export type Delivery = z.output<typeof WebhookDelivery>;

interface Words {
  tone: Tone;
  word: string;
}

/** How a hook stands, in words. */
export function hookState(hook: Hook): Words {
  const { status, reason, failingSince, disabledAt, lastDeliveredAt } = hook;
  if (status === 'failing')
    return { tone: 'hold', word: failingSince ? `failing since ${moment(failingSince)}` : 'failing' };
  if (status === 'disabled') {
    const at = disabledAt ? ` ${moment(disabledAt)}` : '';
    return reason?.code === 'by_request'
      ? { tone: 'plain', word: `switched off${at}` }
      : { tone: 'fail', word: `ended${at}` };
  }
  return lastDeliveredAt === null
    ? { tone: 'plain', word: 'nothing told yet' }
    : { tone: 'pass', word: 'well' };
}

/** What became of a message, in words. */
export function deliveryState({ status, attempts, nextAttemptAt }: Delivery): Words {
  if (status === 'delivered') return { tone: 'pass', word: 'delivered' };
  if (status === 'failed') return { tone: 'fail', word: 'given up' };
  if (attempts === 0 || nextAttemptAt === null) return { tone: 'plain', word: 'on its way' };
  return { tone: 'hold', word: `again ${moment(nextAttemptAt)}` };
}

/** What came back last, as short as it can be said. */
export function answerOf({ lastAttempt }: Delivery): string {
  if (lastAttempt === null) return 'none yet';
  const { answer, failure } = lastAttempt;
  return answer ? String(answer.status) : (failure?.text ?? 'none');
}

/** Events by what they are about; whoever wants single types asks for them over the API. */
export const SUBJECTS = [
  { types: 'setup.*', name: 'Setups: computed, checked, released, withdrawn' },
  { types: 'withdrawal.*', name: 'Withdrawals: a crew has answered' },
  { types: 'grade.*', name: 'Grade checks' },
  { types: 'bench.*', name: 'Bench checks of blades' },
  { types: 'levelRun.*', name: 'Level runs' },
  { types: 'upload.*', name: 'Uploads: processed, refused' },
  { types: 'control.*', name: 'Control: imported, revised, suspect' },
  { types: 'webhookEndpoint.*', name: 'Hooks: changed, ended' },
] as const;

export const hostOf = ({ url }: Hook) => new URL(url).host;
