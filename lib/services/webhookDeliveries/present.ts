import type * as z from 'zod';
import { asMoment, asMomentOrNull } from '@/lib/services/moments';
import type { Note } from '@/openapi/schemas/primitives';
import type { WebhookAttempt } from '@/openapi/schemas/webhook';
import type { AttemptRow, DeliveryRow } from './rows';

type Words = z.output<typeof Note>;

const REASONS: Record<NonNullable<DeliveryRow['reason']>, Words> = {
  attempts_exhausted: {
    code: 'attempts_exhausted',
    text: 'It was tried as often as it is and did not get through.',
    action: 'Mend the receiver, then replay it.',
  },
  endpoint_gone: {
    code: 'endpoint_gone',
    text: 'The receiver answered 410: it wants no more messages.',
    action: 'If that was a mistake, mend the receiver, switch the endpoint on, and replay it.',
  },
  endpoint_disabled: {
    code: 'endpoint_disabled',
    text: 'The endpoint was switched off before it got through.',
    action: 'Switch the endpoint on and replay it.',
  },
};

const FAILURES: Record<string, Omit<Words, 'code'>> = {
  target_refused: {
    text: 'The address is none that messages are sent to.',
    action: 'Give the endpoint an https address.',
  },
  name_unknown: { text: 'The name leads to no address.', action: 'Check the spelling and the DNS entry.' },
  address_refused: {
    text: 'The name leads to an address that is not public.',
    action: 'Put the receiver on a public address, or have this network allowed in the hub’s configuration.',
  },
  connection_failed: {
    text: 'Nobody answered, or the connection broke.',
    action: 'Check that the receiver runs and its firewall lets the hub in.',
  },
  certificate_refused: {
    text: 'The receiver’s certificate is not to be trusted.',
    action: 'Renew it, for this very name, with its whole chain.',
  },
  timed_out: {
    text: 'There was no answer within 20 seconds.',
    action: 'Answer first and work afterwards.',
  },
  answer_unreadable: { text: 'What came back was no HTTP.', action: 'Check the port of the address.' },
  key_changed: {
    text: 'The secret cannot be opened: the hub’s own secret has changed since it was made.',
    action: 'Rotate the endpoint’s secret.',
  },
};

/** Why an answer does not count as delivered. */
function faultOfStatus(status: number): Words | null {
  const code = 'status_refused';
  if (status >= 200 && status < 300) return null;
  if (status >= 300 && status < 400)
    return {
      code,
      text: `It answered ${status}: redirects are not followed.`,
      action: 'Give the endpoint the address that it redirects to.',
    };
  if (status === 410) return { code, text: 'It answered 410: it wants no more messages.' };
  return {
    code,
    text: `It answered ${status}; 2xx would count as delivered.`,
    action: 'Look at its answer.',
  };
}

export function presentAttempt(row: AttemptRow): z.output<typeof WebhookAttempt> {
  const { failure, answerStatus } = row;
  return {
    number: row.number,
    startedAt: asMoment(row.startedAt),
    milliseconds: row.milliseconds,
    request: { url: row.url, address: row.address, headers: row.headers },
    answer:
      answerStatus === null
        ? null
        : {
            status: answerStatus,
            headers: row.answerHeaders ?? {},
            body: row.answerBody ?? '',
            truncated: row.answerTruncated ?? false,
          },
    failure:
      failure !== null
        ? { code: failure, ...FAILURES[failure] }
        : answerStatus === null
          ? null
          : faultOfStatus(answerStatus),
  };
}

/** What list and detail have in common. */
export function presentCommon(row: DeliveryRow) {
  return {
    id: row.id,
    messageId: messageIdOf(row),
    kind: row.kind,
    eventType: row.eventType,
    projectId: row.projectId,
    status: row.status,
    reason: row.reason && REASONS[row.reason],
    attempts: row.attempts,
    nextAttemptAt: asMomentOrNull(row.nextAttemptAt),
    createdAt: asMoment(row.createdAt),
    endedAt: asMomentOrNull(row.endedAt),
  };
}

export function presentDelivery(row: DeliveryRow, lastAttempt: AttemptRow | null) {
  return { ...presentCommon(row), lastAttempt: lastAttempt && presentAttempt(lastAttempt) };
}

/** The event's own id: whoever also reads GET /events knows it again. */
export function messageIdOf({ eventId, id }: Pick<DeliveryRow, 'eventId' | 'id'>): string {
  return eventId ?? id;
}
