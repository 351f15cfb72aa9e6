import type * as z from 'zod';
import { moment } from '@/app/ui/numbers';
import type { Tone } from '@/app/ui/State';
import { EVENT_SUBJECTS, type EventSubject } from '@/openapi/eventSubjects';
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

/** The making of an organization is over before it has a hook. */
type Told = Exclude<EventSubject, 'organization'>;

const WORDS: Record<Told, string> = {
  setup: 'Setups: computed, checked, refitted, released, withdrawn',
  withdrawal: 'Withdrawals: a crew has answered',
  grade: 'Grade checks',
  bench: 'Bench checks of blades',
  levelRun: 'Level runs',
  pegTest: 'Two-peg tests of levels',
  adjustment: 'Adjustments: requested, computed, applied to the control',
  upload: 'Uploads: processed, refused',
  control: 'Control: imported, revised, suspect, trusted again',
  instrument: 'Instruments: registered, calibrated',
  surface: 'Surfaces',
  layer: 'Layers: created, revised',
  job: 'Jobs: done, failed, cancelled',
  project: 'Projects: created, changed',
  person: 'People: invited, accepted, changed',
  session: 'Sessions: opened, closed',
  apiKey: 'Keys: created, rotated, revoked',
  webhookEndpoint: 'Hooks: changed, ended',
};

const isTold = (subject: EventSubject): subject is Told => subject !== 'organization';

/** Events by what they are about; whoever wants single types asks for them over the API. */
export const SUBJECTS = EVENT_SUBJECTS.filter(isTold).map((subject) => ({
  types: `${subject}.*`,
  name: WORDS[subject],
}));

export const hostOf = ({ url }: Hook) => new URL(url).host;
